import { useState } from 'react';
import type { DraftContentBody, DraftDto, VersionDto } from '#schemas/api/instruments.ts';
import type { SampleEntry } from '#schemas/instruments/instrument.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { Button } from '#frontend/components/button.tsx';
import { CodeEditor } from '#frontend/components/code-editor/code-editor.tsx';
import { DraftLine } from '#frontend/components/draft-line.tsx';
import { Guard } from '#frontend/components/guard.tsx';
import { Skeleton } from '#frontend/components/states.tsx';
import { say } from '#frontend/lib/notices.ts';
import type { KeptDraft } from '#frontend/lib/use-kept-draft.ts';
import { useDraftActs } from '../api/instruments.ts';
import { completeKeyword } from '../model/complete-keyword.ts';
import { trialOf, valuesOf, type Trial } from '../model/trial.ts';
import { DraftDrawer } from './draft-drawer.tsx';
import { FieldList } from './field-list.tsx';
import { LiveForm } from './live-form.tsx';
import { PublishDialog } from './publish-dialog.tsx';
import { useDraftVerdict } from './use-draft-verdict.ts';

interface DraftingTableProps {
  studyCode: string;
  draft: DraftDto;
  kept: KeptDraft<DraftContentBody>;
  onPublished: (version: VersionDto) => void;
}

/** Fields, schema and live form of one draft side by side; below them what stands against it and what it changes. */
export function DraftingTable({ studyCode, draft, kept, onPublished }: DraftingTableProps) {
  const { text, samples } = kept.content;
  const { verdict, error, current, good, check } = useDraftVerdict(studyCode, draft, kept.content);
  const { discard } = useDraftActs(studyCode);
  const [trial, setTrial] = useState<Trial>({});
  const [goTo, setGoTo] = useState<{ pointer: string }>();
  const [dialog, setDialog] = useState<'publish' | 'discard'>();
  const writeText = (next: string) => kept.change({ ...kept.content, text: next });
  const writeSamples = (next: SampleEntry[]) => kept.change({ ...kept.content, samples: next });
  const publishable = current && verdict?.publishable === true;

  const handleKeep = () => {
    if (good === undefined) return;
    const values = valuesOf(good.compiled, trial);
    writeSamples([
      ...samples,
      { name: `Sample ${samples.length + 1}`, values, expect: { outcome: 'passes' } },
    ]);
    say('Kept as a sample; say below what must come of it');
  };

  return (
    <div className="flex flex-col gap-3">
      <div className="flex flex-wrap items-start gap-3">
        <div className="min-w-0 flex-1">
          <DraftLine
            draft={kept}
            compare={(theirs) => (
              <CodeEditor label="Their text" value={theirs.text} readOnly height="30dvh" />
            )}
          />
        </div>
        {(draft.changed || kept.unsaved) && <Button onClick={() => setDialog('discard')}>Discard</Button>}
        <Button
          variant="primary"
          disabled={!publishable || kept.theirs !== undefined}
          aria-describedby="publish-why"
          onClick={() => setDialog('publish')}
        >
          Publish
        </Button>
        <p id="publish-why" className="w-full text-right text-sm text-ink-soft">
          {whyNot(publishable, current, verdict)}
        </p>
      </div>
      <div className="grid gap-3 lg:grid-cols-[15rem_minmax(0,1fr)_minmax(0,1fr)]">
        <section
          aria-label="Fields"
          className="flex max-h-[64dvh] flex-col rounded border bg-paper max-lg:max-h-72"
        >
          <h2 className="border-b px-3 py-2 text-base">Fields</h2>
          {good ? (
            <FieldList
              compiled={good.compiled}
              text={text}
              readable={isJson(text)}
              onChange={writeText}
              onGoTo={(pointer) => setGoTo({ pointer })}
            />
          ) : (
            <p className="p-3 text-sm text-ink-soft">They are listed once the schema has no problems.</p>
          )}
        </section>
        <section aria-label="Schema" className="min-w-0">
          <CodeEditor
            label="Schema of the instrument, JSON. Escape, then Tab, leaves the editor."
            value={text}
            onChange={writeText}
            check={check}
            complete={completeKeyword}
            height="64dvh"
            goTo={goTo}
          />
        </section>
        <section
          aria-label="Live form"
          className="flex max-h-[64dvh] min-w-0 flex-col rounded border bg-paper"
        >
          <header className="flex flex-wrap items-baseline gap-x-3 border-b px-4 py-2">
            <h2 className="text-base">Live form</h2>
            <span className="text-sm text-ink-soft">
              {good && good.text !== text
                ? 'of the last text without problems'
                : 'as coordinators will see it'}
            </span>
            <Button variant="quiet" className="ml-auto" onClick={() => setTrial({})}>
              Empty it
            </Button>
          </header>
          {/* A region that scrolls must be reachable by keyboard (WCAG 2.1.1). */}
          {/* eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex */}
          <div tabIndex={0} role="group" aria-label="The form" className="min-h-0 flex-1 overflow-auto p-4">
            {good ? (
              <Guard resetKey={good.hash}>
                <LiveForm
                  studyCode={studyCode}
                  compiled={good.compiled}
                  hash={good.hash}
                  trial={trial}
                  onTrial={setTrial}
                />
              </Guard>
            ) : verdict === undefined ? (
              <Skeleton lines={6} label="Being checked" />
            ) : (
              <p className="text-ink-soft">The form is drawn once the schema has no problems.</p>
            )}
          </div>
        </section>
      </div>
      <DraftDrawer
        verdict={verdict}
        error={error}
        current={current}
        baseVersion={draft.baseVersion}
        samples={samples}
        derived={good?.compiled.fields.filter((field) => field.derived) ?? []}
        onSamples={writeSamples}
        onLoad={({ values }) => setTrial(trialOf(values))}
        onKeep={handleKeep}
        onGoTo={(pointer) => setGoTo({ pointer })}
      />
      {dialog === 'publish' && verdict && (
        <PublishDialog
          studyCode={studyCode}
          draft={draft}
          verdict={verdict}
          save={kept.save}
          onPublished={onPublished}
          onClose={() => setDialog(undefined)}
        />
      )}
      {dialog === 'discard' && (
        <ActDialog
          title={`Discard the draft of ${draft.title}`}
          act="Discard the draft"
          consequences={
            <p>
              {draft.baseVersion === null
                ? 'The draft leaves the drafting table. The instrument was never published, so nothing else changes.'
                : `The text goes back to version ${draft.baseVersion}. Published versions do not change.`}
            </p>
          }
          onAct={async ({ reason }) => {
            const revision = await kept.save();
            if (revision === undefined)
              throw new Error('The draft could not be saved first; see above the editor.');
            const back = await discard(draft.id, reason, revision);
            kept.adopt({ content: { text: back.text, samples: back.samples }, revision: back.revision });
            say('The draft was discarded');
          }}
          onClose={() => setDialog(undefined)}
        />
      )}
    </div>
  );
}

function whyNot(
  publishable: boolean,
  current: boolean,
  verdict: { problems: readonly { severity: string }[]; samples: readonly { passed: boolean }[] } | undefined,
): string {
  if (!current || verdict === undefined) return 'Being checked …';
  if (publishable) return 'Nothing stands against publishing it.';
  if (verdict.problems.some(({ severity }) => severity === 'error'))
    return 'The schema has problems; see below.';
  if (verdict.samples.some(({ passed }) => !passed)) return 'A sample does not come out as said; see below.';
  return 'Try it first: keep at least one sample.';
}

function isJson(text: string): boolean {
  try {
    JSON.parse(text);
    return true;
  } catch {
    return false;
  }
}
