import type { HiddenValue, Operation, ValueDto } from '#schemas/api/capture.ts';
import { Button } from '../../../components/button.tsx';
import { Dialog } from '../../../components/dialog.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import type { Conflict, EntrySaver } from '../model/entry-saver.ts';

interface ConflictDialogProps {
  conflicts: readonly Conflict[];
  labelOf: (address: string) => string;
  zone: string;
  saver: EntrySaver;
  onClose: () => void;
}

/** Both values of each field that two people changed, side by side; a person chooses. */
export function ConflictDialog({ conflicts, labelOf, zone, saver, onClose }: ConflictDialogProps) {
  return (
    <Dialog title="Two people changed the same field" onClose={onClose} wide>
      <ul className="flex flex-col gap-4">
        {conflicts.map(({ address, mine, theirs, by, at }) => (
          <li key={address} className="rounded border border-rule p-3">
            <h3 className="font-semibold text-soot">{labelOf(address)}</h3>
            <div className="mt-2 grid gap-3 sm:grid-cols-2">
              <div className="flex flex-col items-start gap-2">
                <p>
                  Yours: <strong>{mineInWords(mine)}</strong>
                </p>
                <Button onClick={() => saver.resolve(address, 'mine')}>Save mine over it</Button>
              </div>
              <div className="flex flex-col items-start gap-2">
                <p>
                  {by}, {formatMoment(at, zone)}: <strong>{theirsInWords(theirs)}</strong>
                </p>
                <Button onClick={() => saver.resolve(address, 'theirs')}>Keep theirs</Button>
              </div>
            </div>
          </li>
        ))}
      </ul>
    </Dialog>
  );
}

function mineInWords({ value, written, missing, rejected }: Operation): string {
  if (missing !== undefined) return `missing: ${missing}`;
  if (rejected !== undefined) return rejected === null ? 'counts again' : `set aside: ${rejected}`;
  return value === null || value === undefined ? 'empty' : (written ?? String(value));
}

function theirsInWords(value: ValueDto | HiddenValue | null): string {
  if (value === null) return 'empty';
  if ('hidden' in value) return 'entered · hidden until unblinding';
  if (value.missing !== undefined) return `missing: ${value.missing}`;
  return value.written ?? String(value.value);
}
