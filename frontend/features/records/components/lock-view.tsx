import { useState } from 'react';
import type { OpenPointDto, StudyLockDto } from '#schemas/api/records.ts';
import { openPointKinds, type OpenPointKind } from '#schemas/api/records.ts';
import { Button } from '../../../components/button.tsx';
import { Card, PageHead } from '../../../components/card.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { EmptyState } from '../../../components/states.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { formatCount } from '../../../lib/format/numbers.ts';
import { useMay } from '../../../lib/session/ability.ts';
import { useActing, useZone } from '../../../lib/session/session.ts';
import type { LockRecord } from '../api/lock.ts';
import { LockDialog, UnlockDialog } from './lock-dialogs.tsx';

const stateWords: Record<string, string> = {
  'setting-up': 'being set up; it cannot be locked yet',
  running: 'running; its data can be written',
  locked: 'locked; nobody writes study data',
  unblinded: 'unblinded; it stays locked for good',
};

/** The lock of the study: what is open, the act, and every lock and unlock so far. */
export function LockView({ study, record }: { study: string; record: LockRecord }) {
  const may = useMay();
  const { studyState } = useActing();
  const [dialog, setDialog] = useState<'lock' | 'unlock' | null>(null);
  const mayLock = may('lock', 'Study');
  return (
    <>
      <PageHead
        title="Records"
        note={`the study is ${stateWords[studyState ?? ''] ?? studyState ?? ''}`}
        actions={
          mayLock && studyState === 'running' ? (
            <Button variant="primary" onClick={() => setDialog('lock')}>
              Lock the study
            </Button>
          ) : mayLock && studyState === 'locked' ? (
            <Button variant="danger" onClick={() => setDialog('unlock')}>
              Unlock the study
            </Button>
          ) : undefined
        }
      />
      <div className="grid items-start gap-4 lg:grid-cols-2">
        <OpenPoints points={record.openPoints} />
        <LockHistory history={record.history} />
      </div>
      {dialog === 'lock' && (
        <LockDialog study={study} points={record.openPoints} onClose={() => setDialog(null)} />
      )}
      {dialog === 'unlock' && <UnlockDialog study={study} onClose={() => setDialog(null)} />}
    </>
  );
}

function OpenPoints({ points }: { points: readonly OpenPointDto[] }) {
  return (
    <Card title="Still open" note="each keeps the study from being locked, or is let be with a reason">
      {points.length === 0 ? (
        <StateMark state="settled" word="nothing is open" />
      ) : (
        <ul className="flex flex-col gap-2">
          {points.map(({ kind, label, count }) => (
            <li key={kind}>
              <StateMark
                state="asks"
                word={kind === 'no-signed-plan' ? label : `${formatCount(count)} ${label}`}
                className="whitespace-normal!"
              />
            </li>
          ))}
        </ul>
      )}
    </Card>
  );
}

function LockHistory({ history }: { history: readonly StudyLockDto[] }) {
  const zone = useZone();
  return (
    <Card title="History" note="newest first">
      {history.length === 0 ? (
        <EmptyState title="The study was never locked" />
      ) : (
        <ol className="flex flex-col gap-4">
          {history.map(({ kind, by, at, reason, openPoints }) => (
            <li key={at} className="border-l-3 border-rule pl-3">
              <p>
                <strong>{kind === 'lock' ? 'Locked' : 'Unlocked'}</strong> by {by},{' '}
                <time dateTime={at}>{formatMoment(at, zone)}</time>
              </p>
              <p className="text-sm">{reason}</p>
              {openPoints.length > 0 && (
                <ul className="list-disc pl-6 text-sm text-ink-soft">
                  {openPoints.map((point) => (
                    <li key={point.kind}>
                      {formatCount(point.count)} {openPointKinds[point.kind as OpenPointKind] ?? point.kind}:{' '}
                      {point.override ?? 'no reason kept'}
                    </li>
                  ))}
                </ul>
              )}
            </li>
          ))}
        </ol>
      )}
    </Card>
  );
}
