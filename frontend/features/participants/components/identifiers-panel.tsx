import { useState } from 'react';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { Button } from '#frontend/components/button.tsx';
import { Card } from '#frontend/components/card.tsx';
import { Caution } from '#frontend/components/caution.tsx';
import { ErrorSummary } from '#frontend/components/error-summary.tsx';
import { formatTime } from '#frontend/lib/format/dates.ts';
import { useMay } from '#frontend/lib/session/ability.ts';
import { useParticipantActs } from '../api/participants.ts';
import { CorrectIdentifiersDialog } from './correct-identifiers-dialog.tsx';
import { IdentifiersReadings } from './identifiers-readings.tsx';
import { shownNow, useCoveredLater, type Shown } from './use-cover.ts';

const rows = [
  ['name', 'Full name'],
  ['birthDate', 'Birth date'],
  ['phone', 'Phone'],
  ['email', 'E-mail'],
  ['postcode', 'Postcode'],
  ['recordNumber', 'Record number'],
] as const;

/**
 * Who a participant is: covered until asked for, each look an act. What is shown lives in this component only and is
 * gone when it is covered or left (WS-13).
 */
export function IdentifiersPanel({
  studyCode,
  participant,
}: {
  studyCode: string;
  participant: ParticipantDto;
}) {
  const may = useMay();
  const { readIdentifiers } = useParticipantActs(studyCode, participant);
  const [shown, setShown] = useState<Shown>();
  const [error, setError] = useState<unknown>();
  const [dialog, setDialog] = useState<'reason' | 'correct'>();
  const [busy, setBusy] = useState(false);
  useCoveredLater(shown, () => setShown(undefined));

  const plain = may('read', 'DirectIdentifiers', participant);
  if (!plain && !may('open', 'DirectIdentifiers', participant)) return null;

  const look = async () => {
    if (!plain) return setDialog('reason');
    setBusy(true);
    setError(undefined);
    try {
      setShown(shownNow(await readIdentifiers()));
    } catch (problem) {
      setError(problem);
    } finally {
      setBusy(false);
    }
  };

  return (
    <Card title="Who this is">
      <div className="flex flex-col gap-4">
        {error !== undefined && <ErrorSummary error={error} />}
        {shown === undefined ? (
          <Covered urgent={!plain} busy={busy} onLook={() => void look()} />
        ) : (
          <>
            <dl className="grid grid-cols-[auto_1fr] gap-x-5 gap-y-1.5">
              {rows.map(([field, label]) => (
                <div key={field} className="contents">
                  <dt className="text-ink-soft">{label}</dt>
                  <dd className="break-words">{shown.identifiers[field] ?? '–'}</dd>
                </div>
              ))}
            </dl>
            <div className="flex flex-wrap items-center gap-3">
              <Button onClick={() => setShown(undefined)}>Cover again</Button>
              {may('update', 'DirectIdentifiers', participant) && (
                <Button variant="quiet" onClick={() => setDialog('correct')}>
                  Correct
                </Button>
              )}
              <span className="text-sm text-ink-soft">
                Covers itself at {formatTime(shown.coverAt.toISOString())}
              </span>
            </div>
          </>
        )}
        <IdentifiersReadings studyCode={studyCode} participant={participant} />
      </div>
      {dialog === 'reason' && (
        <ActDialog
          title={`Who ${participant.code} is`}
          consequences={
            <p>
              You do not need to know this for your work here. The look is written down with your reason, the
              monitor and the other investigators are told that it happened, and it ends after fifteen
              minutes.
            </p>
          }
          act="Look"
          onAct={async ({ reason }) => setShown(shownNow(await readIdentifiers(reason)))}
          onClose={() => setDialog(undefined)}
        />
      )}
      {dialog === 'correct' && shown !== undefined && (
        <CorrectIdentifiersDialog
          studyCode={studyCode}
          participant={participant}
          shown={shown.identifiers}
          onClose={() => setDialog(undefined)}
          onDone={() => setShown(undefined)}
        />
      )}
    </Card>
  );
}

function Covered({ urgent, busy, onLook }: { urgent: boolean; busy: boolean; onLook: () => void }) {
  return (
    <>
      {urgent && (
        <Caution title="For emergencies only">
          Name and contact are for those who look after the participant.
        </Caution>
      )}
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <Button busy={busy} onClick={onLook}>
          {urgent ? 'Look, with a reason' : 'Show name and contact'}
        </Button>
        <span className="text-sm text-ink-soft">Each look is written down.</span>
      </div>
    </>
  );
}
