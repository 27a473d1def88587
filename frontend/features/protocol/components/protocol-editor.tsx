import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useCallback, useState } from 'react';
import type {
  ProtocolDraftDto,
  ProtocolVerdictDto,
  ProtocolVersionDto,
  ShownProtocol,
} from '#schemas/api/protocol.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { Button } from '#frontend/components/button.tsx';
import { CodeEditor, type CodeFinding } from '#frontend/components/code-editor/code-editor.tsx';
import { DraftLine } from '#frontend/components/draft-line.tsx';
import { Guard } from '#frontend/components/guard.tsx';
import { PaneTabs } from '#frontend/components/pane-tabs.tsx';
import { ProblemList } from '#frontend/components/problem-list.tsx';
import { FailedState, Skeleton } from '#frontend/components/states.tsx';
import { say } from '#frontend/lib/notices.ts';
import type { KeptDraft } from '#frontend/lib/use-kept-draft.ts';
import { useSettled } from '#frontend/lib/use-settled.ts';
import { protocolVerdictQuery, useProtocolActs } from '../api/protocol.ts';
import { ProtocolDifferenceList } from './protocol-difference-list.tsx';
import { protocolPanes } from './protocol-panes.tsx';

interface ProtocolEditorProps {
  studyCode: string;
  draft: ProtocolDraftDto;
  kept: KeptDraft<string>;
  onPublished: (version: ProtocolVersionDto) => void;
}

/** The protocol as text beside its readable form; below what stands against it and what it changes. */
export function ProtocolEditor({ studyCode, draft, kept, onPublished }: ProtocolEditorProps) {
  const client = useQueryClient();
  const settled = useSettled(kept.content);
  const query = useQuery(protocolVerdictQuery(studyCode, settled));
  const [good, setGood] = useState<ShownProtocol>();
  const content = query.data?.content;
  if (content && content !== good) setGood(content);
  const verdict = query.data;
  const current = settled === kept.content && verdict !== undefined;
  const [goTo, setGoTo] = useState<{ pointer: string }>();
  const [view, setView] = useState('overview');
  const [dialog, setDialog] = useState<'publish' | 'discard'>();
  const check = useCallback(
    async (text: string): Promise<CodeFinding[]> =>
      (await client.fetchQuery(protocolVerdictQuery(studyCode, text))).problems,
    [client, studyCode],
  );

  return (
    <div className="flex flex-col gap-3">
      <div className="flex flex-wrap items-start gap-3">
        <div className="min-w-0 flex-1">
          <DraftLine
            draft={kept}
            compare={(theirs) => <CodeEditor label="Their text" value={theirs} readOnly height="30dvh" />}
          />
        </div>
        {(draft.changed || kept.unsaved) && <Button onClick={() => setDialog('discard')}>Discard</Button>}
        <Button
          variant="primary"
          disabled={!current || !verdict.publishable || kept.theirs !== undefined}
          aria-describedby="publish-why"
          onClick={() => setDialog('publish')}
        >
          Publish
        </Button>
        <p id="publish-why" className="w-full text-right text-sm text-ink-soft">
          {whyNot(current, verdict)}
        </p>
      </div>
      <div className="grid gap-3 lg:grid-cols-2">
        <section aria-label="Text" className="min-w-0">
          <CodeEditor
            label="Text of the protocol, JSON. Escape, then Tab, leaves the editor."
            value={kept.content}
            onChange={kept.change}
            check={check}
            height="70dvh"
            goTo={goTo}
          />
        </section>
        <section
          aria-label="As it reads"
          className="max-h-[70dvh] min-w-0 overflow-auto rounded border bg-paper"
        >
          {good ? (
            <Guard resetKey={good}>
              <PaneTabs
                label="As it reads"
                panes={protocolPanes({ studyCode, content: good, instruments: [] })}
                chosen={view}
                onChoose={setView}
              />
            </Guard>
          ) : query.error ? (
            <FailedState error={query.error} />
          ) : verdict === undefined ? (
            <Skeleton lines={8} label="Being checked" />
          ) : (
            <p className="p-4 text-ink-soft">It reads here once the text has no problems.</p>
          )}
        </section>
      </div>
      <Findings
        verdict={verdict}
        hasVersion={draft.baseVersion !== null}
        onGoTo={(pointer) => setGoTo({ pointer })}
      />
      {dialog === 'publish' && verdict && (
        <PublishProtocolDialog
          studyCode={studyCode}
          draft={draft}
          verdict={verdict}
          save={kept.save}
          onPublished={onPublished}
          onClose={() => setDialog(undefined)}
        />
      )}
      {dialog === 'discard' && (
        <DiscardDialog studyCode={studyCode} draft={draft} kept={kept} onClose={() => setDialog(undefined)} />
      )}
    </div>
  );
}

interface FindingsProps {
  verdict: ProtocolVerdictDto | undefined;
  hasVersion: boolean;
  onGoTo: (pointer: string) => void;
}

function Findings({ verdict, hasVersion, onGoTo }: FindingsProps) {
  const [chosen, setChosen] = useState('problems');
  if (verdict === undefined) return <Skeleton lines={2} label="Being checked" />;
  const differences = { data: verdict.differences, error: null, refetch: () => undefined };
  const empty = hasVersion
    ? 'Nothing differs from the newest version.'
    : 'There is no version to compare with yet.';
  return (
    <section aria-label="Problems and changes" className="rounded border bg-paper">
      <PaneTabs
        label="Problems and changes"
        chosen={chosen}
        onChoose={setChosen}
        panes={[
          {
            key: 'problems',
            label: `Problems (${verdict.problems.length})`,
            content: (
              <div className="p-4">
                <ProblemList problems={verdict.problems} onGoTo={({ pointer }) => onGoTo(pointer)} />
              </div>
            ),
          },
          {
            key: 'changes',
            label: `Changes (${verdict.differences.length})`,
            content: (
              <div className="p-4">
                <ProtocolDifferenceList query={differences} empty={empty} />
              </div>
            ),
          },
        ]}
      />
    </section>
  );
}

interface PublishProtocolDialogProps {
  studyCode: string;
  draft: ProtocolDraftDto;
  verdict: ProtocolVerdictDto;
  save: () => Promise<number | undefined>;
  onPublished: (version: ProtocolVersionDto) => void;
  onClose: () => void;
}

function PublishProtocolDialog({
  studyCode,
  draft,
  verdict,
  save,
  onPublished,
  onClose,
}: PublishProtocolDialogProps) {
  const { publish } = useProtocolActs(studyCode);
  const next = (draft.baseVersion ?? 0) + 1;
  return (
    <ActDialog
      title={next === 1 ? 'Publish the protocol' : `Publish amendment ${next - 1}`}
      act={`Publish version ${next}`}
      reasons={next === 1 ? ['first version'] : []}
      consequences={
        <>
          <p>
            Version {next} never changes again. Participants enrolled from now on follow it; those enrolled
            before stay with the version they were enrolled under.
          </p>
          {next > 1 && (
            <ProtocolDifferenceList
              query={{ data: verdict.differences, error: null, refetch: () => undefined }}
              empty="Nothing differs from the newest version."
            />
          )}
        </>
      }
      onAct={async ({ reason }) => {
        const revision = await save();
        if (revision === undefined)
          throw new Error('The draft could not be saved first; see above the editor.');
        onPublished(await publish(reason, revision));
      }}
      onClose={onClose}
    />
  );
}

function DiscardDialog({
  studyCode,
  draft,
  kept,
  onClose,
}: Pick<ProtocolEditorProps, 'studyCode' | 'draft' | 'kept'> & { onClose: () => void }) {
  const { discard } = useProtocolActs(studyCode);
  return (
    <ActDialog
      title="Discard the draft of the protocol"
      act="Discard the draft"
      consequences={
        <p>
          The text goes back to{' '}
          {draft.baseVersion === null ? 'a blank protocol' : `version ${draft.baseVersion}`}. Published
          versions do not change.
        </p>
      }
      onAct={async ({ reason }) => {
        const revision = await kept.save();
        if (revision === undefined)
          throw new Error('The draft could not be saved first; see above the editor.');
        const back = await discard(reason, revision);
        kept.adopt({ content: back.text, revision: back.revision });
        say('The draft was discarded');
      }}
      onClose={onClose}
    />
  );
}

function whyNot(current: boolean, verdict: ProtocolVerdictDto | undefined): string {
  if (!current || verdict === undefined) return 'Being checked …';
  return verdict.publishable ? 'Nothing stands against publishing it.' : 'The text has problems; see below.';
}
