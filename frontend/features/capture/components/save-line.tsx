import { Button } from '../../../components/button.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { formatTime } from '../../../lib/format/dates.ts';
import type { SaverState } from '../model/entry-saver.ts';

interface SaveLineProps {
  state: SaverState;
  zone: string;
  onCompare: () => void;
}

/** What the server has, and what only this device has: always in sight, announced when it changes. */
export function SaveLine({ state, zone, onCompare }: SaveLineProps) {
  const { phase, revision, savedAt, waiting, conflicts, stopped } = state;
  const changes = waiting === 1 ? '1 change' : `${waiting} changes`;
  return (
    <div
      role="status"
      className="sticky bottom-0 z-10 flex flex-wrap items-center gap-x-5 gap-y-1 border-t border-rule bg-paper px-4 py-2.5 print:hidden"
    >
      {phase === 'saved' && (
        <StateMark
          state="settled"
          word={
            savedAt === null
              ? `As saved, revision ${revision}`
              : `Saved ${formatTime(savedAt, zone, { seconds: true })}, revision ${revision}`
          }
        />
      )}
      {(phase === 'waiting' || phase === 'saving') && (
        <StateMark state="underway" word={`Saving ${changes}`} />
      )}
      {phase === 'offline' && (
        <StateMark state="late" word={`Kept on this device, ${changes} waiting for the network`} />
      )}
      {phase === 'stopped' && (
        <StateMark state="asks" word={`Not saved: ${stopped} Kept on this device, ${changes}.`} />
      )}
      {conflicts.length > 0 && (
        <span className="flex items-center gap-3">
          <StateMark state="asks" word="Someone else changed this entry" />
          <Button onClick={onCompare}>Compare</Button>
        </span>
      )}
    </div>
  );
}
