import type { ReactNode } from 'react';
import { formatTime } from '../lib/format/dates.ts';
import type { KeptDraft } from '../lib/use-kept-draft.ts';
import { Button } from './button.tsx';
import { ErrorSummary } from './error-summary.tsx';
import { StateMark } from './pen-mark.tsx';

interface DraftLineProps<Content> {
  draft: KeptDraft<Content>;
  /** Shows what somebody else stored beside what is typed here. */
  compare: (theirs: Content) => ReactNode;
}

/** "Saved 12:04:31, revision 3", "Not saved yet", or what stands in the way. */
export function DraftLine<Content>({ draft, compare }: DraftLineProps<Content>) {
  const { unsaved, saving, savedAt, revision, failure, theirs } = draft;
  if (theirs !== undefined) {
    return (
      <div role="alert" className="flex flex-col gap-3 rounded border border-arterial bg-arterial-wash p-3">
        <p>
          Somebody else changed this draft meanwhile (revision {theirs.revision}). Yours is still in the
          editor; compare and choose.
        </p>
        {compare(theirs.content)}
        <div className="flex flex-wrap gap-3">
          <Button onClick={() => draft.adopt(theirs)}>Take theirs</Button>
          <Button variant="primary" onClick={draft.overrule}>
            Keep mine over theirs
          </Button>
        </div>
      </div>
    );
  }
  return (
    <div className="flex flex-col gap-2">
      {failure !== undefined && <ErrorSummary error={failure} />}
      <div role="status" className="flex flex-wrap items-center gap-3 text-sm">
        {unsaved ? (
          <StateMark state="underway" word={saving ? 'saving' : 'not saved yet'} />
        ) : (
          <StateMark
            state="settled"
            word={`saved${savedAt ? ` ${formatTime(savedAt, undefined, { seconds: true })}` : ''}, revision ${revision}`}
          />
        )}
        {unsaved && (
          <Button variant="quiet" busy={saving} onClick={() => void draft.save()}>
            Save now
          </Button>
        )}
      </div>
    </div>
  );
}
