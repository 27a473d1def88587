import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useCallback, useMemo, useState } from 'react';
import type { DraftContentBody, DraftDto, VerdictDto } from '#schemas/api/instruments.ts';
import { compileInstrument } from '#schemas/instruments/compile-instrument.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import type { CodeFinding } from '#frontend/components/code-editor/code-editor.tsx';
import { useSettled } from '#frontend/lib/use-settled.ts';
import { verdictQuery } from '../api/instruments.ts';
import { library } from '../model/library.ts';

export interface DraftVerdict {
  /** Of the text and samples as they stood when typing paused last. */
  verdict: VerdictDto | undefined;
  error: Error | null;
  /** The verdict is of exactly what is typed now. */
  current: boolean;
  /** The last text without problems, for the form and the list of fields. */
  good: { compiled: CompiledInstrument; hash: string; text: string } | undefined;
  /** Findings for the editor's marks. */
  check: (text: string) => Promise<readonly CodeFinding[]>;
}

/** Asks the server after each pause what it says of a draft, and keeps the last form that was without problems. */
export function useDraftVerdict(studyCode: string, draft: DraftDto, content: DraftContentBody): DraftVerdict {
  const client = useQueryClient();
  const settled = useSettled(content);
  const query = useQuery(verdictQuery(studyCode, draft.id, settled));
  const [good, setGood] = useState<{ text: string; hash: string }>();
  const hash = query.isPlaceholderData ? undefined : query.data?.validatorHash;
  if (hash && (good?.hash !== hash || good.text !== settled.text)) setGood({ text: settled.text, hash });

  const compiled = useMemo(() => {
    if (good === undefined) return undefined;
    const made = compileInstrument(JSON.parse(good.text) as InstrumentSchema, library);
    return 'problems' in made ? undefined : made;
  }, [good]);

  const { samples } = content;
  const check = useCallback(
    async (text: string): Promise<CodeFinding[]> => {
      const { problems } = await client.fetchQuery(verdictQuery(studyCode, draft.id, { text, samples }));
      return problems.map(({ pointer, message, severity }) => ({ pointer, message, severity }));
    },
    [client, studyCode, draft.id, samples],
  );

  return {
    verdict: query.data,
    error: query.error,
    current: settled === content && !query.isPlaceholderData && query.data !== undefined,
    good: good && compiled && { compiled, ...good },
    check,
  };
}
