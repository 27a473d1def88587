import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { Button } from '../../../components/button.tsx';
import { PageHead } from '../../../components/card.tsx';
import { ErrorSummary } from '../../../components/error-summary.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { EmptyState, Loaded, Skeleton } from '../../../components/states.tsx';
import { formatDate, zoneOffset } from '../../../lib/format/dates.ts';
import { useMay } from '../../../lib/session/ability.ts';
import { useActing } from '../../../lib/session/session.ts';
import { useUrlState } from '../../../lib/use-url-state.ts';
import { entryQuery, useOpenEntry } from '../api/entries.ts';
import { useNoteDeviation, useStampStep, useVisitAct, type RunSheet } from '../api/visits.ts';
import { stepClocks, type StepClock } from '../model/step-clock.ts';
import { DeviationList } from './deviation-list.tsx';
import { EntryEditor } from './entry-editor.tsx';
import { LiveColumn } from './live-column.tsx';
import { RunSheetRail } from './run-sheet-rail.tsx';
import { StepPanel } from './step-panel.tsx';
import { visitLook } from './visit-look.ts';

/** A run sheet: the rail of steps, the chosen step with its form, and what the visit measures so far. */
export function RunSheetView({ study, sheet }: { study: string; sheet: RunSheet }) {
  const { visit, visitType, timeZone, events } = sheet;
  const { role, studyState } = useActing();
  const may = useMay();
  const now = useNow(visit.state === 'under-way');
  const steps = visitType.runSheet;
  const [chosen, setChosen] = useUrlState('step', firstOpen(sheet) ?? steps[0]?.key ?? '');
  const clocks = stepClocks(steps, events, visit.startedAt, now);
  const clock = clocks.find(({ step }) => step.key === chosen) ?? clocks[0];
  const entryStates = new Map(sheet.entries.map(({ stepKey, state }) => [stepKey, state]));
  const mayStamp = visit.state === 'under-way' && studyState === 'running' && may('update', 'Visit');
  return (
    <>
      <PageHead
        title={`${visit.participantCode} · ${visit.label}`}
        note={`${visit.startedAt ? formatDate(visit.startedAt, timeZone) : `planned ${visit.plannedOn}`}, ${timeZone} (${zoneOffset(new Date().toISOString(), timeZone)}) · window ${visit.windowFrom} to ${visit.windowTo} · protocol version ${sheet.protocolVersion}`}
        actions={<VisitActs study={study} sheet={sheet} />}
      />
      <div className="mb-3">
        <StateMark {...visitLook(visit)} />
      </div>
      <div className="grid items-start gap-4 lg:grid-cols-[18rem_minmax(0,1fr)] xl:grid-cols-[18rem_minmax(0,1fr)_17rem]">
        <RunSheetRail
          clocks={clocks}
          entryStates={entryStates}
          chosen={clock?.step.key ?? ''}
          zone={timeZone}
          onChoose={setChosen}
        />
        <div className="flex min-w-0 flex-col gap-4">
          {clock !== undefined && (
            <>
              <StepPanel
                key={clock.step.key}
                study={study}
                visitId={visit.id}
                clock={clock}
                now={now}
                mayStamp={mayStamp}
              />
              <StepEntry
                study={study}
                sheet={sheet}
                clock={clock}
                mayOpen={mayStamp && clock.step.performedBy === role}
              />
            </>
          )}
          <DeviationList deviations={sheet.deviations} steps={steps} zone={timeZone} />
        </div>
        <LiveColumn study={study} visitId={visit.id} />
      </div>
    </>
  );
}

/** The form of the chosen step, once it was opened. */
function StepEntry({
  study,
  sheet,
  clock,
  mayOpen,
}: {
  study: string;
  sheet: RunSheet;
  clock: StepClock;
  mayOpen: boolean;
}) {
  const { visit, timeZone } = sheet;
  const open = useOpenEntry(study, visit.id);
  const { step } = clock;
  const known = sheet.entries.find(({ stepKey }) => stepKey === step.key);
  const query = useQuery({ ...entryQuery(study, known?.id ?? ''), enabled: known !== undefined });
  if (step.instrument === undefined) return null;
  if (known !== undefined) {
    if (query.data === undefined && query.error === null)
      return <Skeleton lines={8} label="Loading the entry" />;
    return (
      <Loaded query={query}>
        {(entry) => <EntryEditor study={study} entry={entry} zone={timeZone} siteId={visit.siteId} />}
      </Loaded>
    );
  }
  return (
    <section className="rounded-md border border-rule bg-paper p-4">
      {open.error !== null && <ErrorSummary error={open.error} />}
      {mayOpen ? (
        <Button variant="primary" large busy={open.isPending} onClick={() => open.mutate(step.key)}>
          Fill in
        </Button>
      ) : (
        <EmptyState title="Nothing has been entered at this step">
          <p>
            {visit.state === 'planned'
              ? 'Begin the visit; then its steps can be filled in.'
              : `It is filled in by the ${step.performedBy.replaceAll('-', ' ')}.`}
          </p>
        </EmptyState>
      )}
    </section>
  );
}

/** What may be done with the visit as a whole. */
function VisitActs({ study, sheet }: { study: string; sheet: RunSheet }) {
  const { visit, visitType } = sheet;
  const may = useMay();
  const { studyState } = useActing();
  const act = useVisitAct(study, visit);
  const stamp = useStampStep(study, visit.id);
  const deviation = useNoteDeviation(study, visit.id);
  const [dialog, setDialog] = useState<'deviation' | 'stop' | null>(null);
  if (studyState !== 'running') return null;
  const current = firstOpen(sheet) ?? visitType.runSheet[0]?.key ?? '';
  return (
    <>
      {act.error !== null && <ErrorSummary error={act.error} />}
      {visit.state === 'planned' && may('update', 'Visit') && may('create', 'Visit') && (
        <Button
          variant="primary"
          busy={act.isPending}
          onClick={() => act.mutate({ path: 'beginning', body: { startedAt: new Date().toISOString() } })}
        >
          Begin the visit
        </Button>
      )}
      {visit.state === 'under-way' && may('complete', 'Visit') && (
        <Button busy={act.isPending} onClick={() => act.mutate({ path: 'completion', body: {} })}>
          Complete the visit
        </Button>
      )}
      {visit.state !== 'planned' && may('create', 'Deviation') && (
        <Button onClick={() => setDialog('deviation')}>Note a deviation</Button>
      )}
      {visit.state === 'under-way' && may('update', 'Visit') && (
        <Button variant="danger" onClick={() => setDialog('stop')}>
          Stop, participant distress
        </Button>
      )}
      {dialog === 'deviation' && (
        <ActDialog
          title="Note a deviation"
          act="Note it"
          consequences={
            <p>
              It stands on the run sheet and in the participant’s record. Write nothing that names a person.
            </p>
          }
          onAct={({ reason }) => deviation.mutateAsync({ description: reason, stepKey: current })}
          onClose={() => setDialog(null)}
        />
      )}
      {dialog === 'stop' && (
        <ActDialog
          title="Stop, participant distress"
          act="Stop now"
          consequences={
            <p>
              The time is stamped and a deviation noted. Care for the participant first: follow the approved
              protocol, local policy and the judgement of licensed staff.
            </p>
          }
          reasons={['pain', 'faintness', 'wish of the participant']}
          onAct={({ reason }) =>
            stamp.mutateAsync({
              stepKey: current,
              kind: 'distress-stop',
              observedAt: new Date().toISOString(),
              reason,
            })
          }
          onClose={() => setDialog(null)}
        />
      )}
    </>
  );
}

/** The first step that waits to be filled in or stamped. */
function firstOpen({ visitType, entries, events }: RunSheet): string | undefined {
  return visitType.runSheet.find(({ key, instrument }) => {
    if (events.some((event) => event.stepKey === key && event.kind === 'skipped')) return false;
    if (instrument === undefined) return !events.some((event) => event.stepKey === key);
    return entries.find(({ stepKey }) => stepKey === key)?.state !== 'complete';
  })?.key;
}

/** The present instant, drawn anew each second while clocks run. */
function useNow(running: boolean): number {
  const [now, setNow] = useState(() => Date.now());
  useEffect(() => {
    if (!running) return;
    const timer = setInterval(() => setNow(Date.now()), 1000);
    return () => clearInterval(timer);
  }, [running]);
  return now;
}
