import { useState } from 'react';
import type { OpenPointDto, OpenPointKind } from '#schemas/api/records.ts';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { TextareaField } from '../../../components/fields.tsx';
import { formatCount } from '../../../lib/format/numbers.ts';
import { say } from '../../../lib/notices.ts';
import { useRefusals } from '../../../lib/use-refusals.ts';
import { useChangeLock } from '../api/lock.ts';

interface LockDialogProps {
  study: string;
  points: readonly OpenPointDto[];
  onClose: () => void;
}

/** Locks the study; each open point takes a reason why it is let be. */
export function LockDialog({ study, points, onClose }: LockDialogProps) {
  const change = useChangeLock(study);
  const [reasons, setReasons] = useState<Partial<Record<OpenPointKind, string>>>({});
  const [refused, run] = useRefusals();
  const overrides = points.flatMap(({ kind }) => {
    const reason = reasons[kind]?.trim() ?? '';
    return reason === '' ? [] : [{ kind, reason }];
  });
  const errorOf = (kind: OpenPointKind): string | undefined => {
    const at = overrides.findIndex((override) => override.kind === kind);
    return refused[`/overrides/${kind}`] ?? refused[`/overrides/${at}/reason`];
  };
  const handleLock = async (reason: string, password: string): Promise<void> => {
    await run(() => change.mutateAsync({ path: 'lock', body: { reason, password, overrides } }));
    say('The study is locked');
  };
  return (
    <ActDialog
      title="Lock the study"
      act="Lock the study"
      password
      consequences={
        <p>
          From now on nobody writes study data by any road: no visit, value, query, mark or signature. A
          locked study can be unblinded; until then it can be unlocked with a reason.
        </p>
      }
      onAct={({ reason, password = '' }) => handleLock(reason, password)}
      onClose={onClose}
    >
      {points.map(({ kind, label, count }) => (
        <TextareaField
          key={kind}
          label={`Open: ${kind === 'no-signed-plan' ? label : `${formatCount(count)} ${label}`}`}
          help="Close it first, or say why the study is locked all the same."
          required
          rows={2}
          value={reasons[kind] ?? ''}
          onChange={(event) => setReasons({ ...reasons, [kind]: event.target.value })}
          error={errorOf(kind)}
        />
      ))}
    </ActDialog>
  );
}

export function UnlockDialog({ study, onClose }: Omit<LockDialogProps, 'points'>) {
  const change = useChangeLock(study);
  const handleUnlock = async (reason: string, password: string): Promise<void> => {
    await change.mutateAsync({ path: 'unlock', body: { reason, password } });
    say('The study is unlocked');
  };
  return (
    <ActDialog
      title="Unlock the study"
      act="Unlock the study"
      password
      consequences={
        <p>
          Study data can be written again. Cuts that were made stay as they are; plans signed from the lock
          until now count as post hoc.
        </p>
      }
      onAct={({ reason, password = '' }) => handleUnlock(reason, password)}
      onClose={onClose}
    />
  );
}
