import { useState } from 'react';
import type { RunSheetStep } from '#schemas/protocol/protocol.ts';
import { cautionClosing, cautionTexts } from '#schemas/vocabulary/caution-texts.ts';
import type { StepEventKind } from '#schemas/api/capture.ts';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { Button } from '../../../components/button.tsx';
import { Caution } from '../../../components/caution.tsx';
import { ErrorSummary } from '../../../components/error-summary.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { formatClock } from '../../../lib/format/dates.ts';
import { useStampStep } from '../api/visits.ts';
import type { StepClock } from '../model/step-clock.ts';

interface StepPanelProps {
  study: string;
  visitId: string;
  clock: StepClock;
  now: number;
  /** Whether the actor may stamp on this run sheet. */
  mayStamp: boolean;
}

/** The chosen step: instructions, hold point, timers, and the press that stamps what happens next. */
export function StepPanel({ study, visitId, clock, now, mayStamp }: StepPanelProps) {
  const stamp = useStampStep(study, visitId);
  const [reasonFor, setReasonFor] = useState<StepEventKind | null>(null);
  const { step, hold } = clock;
  const press = (kind: StepEventKind, reason?: string) =>
    stamp.mutateAsync({
      stepKey: step.key,
      kind,
      observedAt: new Date().toISOString(),
      ...(reason === undefined ? {} : { reason }),
    });

  return (
    <section
      aria-labelledby="step-title"
      className="rounded-md flex flex-col gap-3 border border-rule bg-paper p-4"
    >
      <div className="flex flex-wrap items-baseline gap-x-3">
        <h2 id="step-title" className="text-lg">
          {step.label}
        </h2>
        <span className="text-sm text-ink-soft">
          {step.durationMinutes} min, done by the {step.performedBy.replaceAll('-', ' ')}
        </span>
      </div>
      {step.instructions !== undefined && <p className="max-w-prose">{step.instructions}</p>}
      {step.caution !== undefined && <StepCaution code={step.caution} />}
      {hold !== null && <HoldLine hold={hold} />}
      <Timer clock={clock} now={now} />
      {stamp.error !== null && <ErrorSummary error={stamp.error} />}
      {mayStamp && (
        <div className="flex flex-wrap gap-3">
          {nextPress(clock).map(({ kind, label }) => (
            <Button
              key={kind}
              large
              variant={kind === 'begun' || kind === 'stamped' ? 'primary' : 'plain'}
              busy={stamp.isPending}
              onClick={() =>
                hold?.state === 'shut' && kind === 'begun' ? setReasonFor('hold-passed') : void press(kind)
              }
            >
              {label}
            </Button>
          ))}
          {clock.begunAt === null && !clock.skipped && (
            <Button variant="quiet" onClick={() => setReasonFor('skipped')}>
              Skip this step
            </Button>
          )}
        </div>
      )}
      {reasonFor !== null && (
        <ActDialog
          title={
            reasonFor === 'skipped' ? `Skip: ${step.label}` : `Pass the hold point: ${hold?.label ?? ''}`
          }
          act={reasonFor === 'skipped' ? 'Skip the step' : 'Pass it and begin'}
          consequences={
            <p>
              {reasonFor === 'skipped'
                ? 'The step stays empty and the skipping is noted as a deviation.'
                : 'The condition does not hold yet. Passing it is noted as a deviation.'}
            </p>
          }
          reasons={['participant’s wish', 'equipment failed', 'time ran out']}
          onAct={async ({ reason }) => {
            await press(reasonFor, reason);
            if (reasonFor === 'hold-passed') await press('begun');
          }}
          onClose={() => setReasonFor(null)}
        />
      )}
    </section>
  );
}

function StepCaution({ code }: { code: string }) {
  if (!(code in cautionTexts)) return null;
  const { title, text } = cautionTexts[code as keyof typeof cautionTexts];
  return (
    <Caution title={title}>
      {text} {cautionClosing}
    </Caution>
  );
}

function HoldLine({ hold }: { hold: NonNullable<StepClock['hold']> }) {
  const { label, state, elapsed, needed } = hold;
  const word = { shut: 'holds, wait', open: 'holds, open', passed: 'passed with a reason' }[state];
  return (
    <div className="flex flex-wrap items-center gap-x-4 rounded border border-dashed border-edge px-3 py-2">
      <StateMark state={state === 'shut' ? 'underway' : 'settled'} word={word} />
      <span>Hold point: {label}</span>
      {needed !== null && (
        <span className="ml-auto text-2xl text-soot tabular-nums" aria-live="off">
          {elapsed === null ? 'waits for its event' : `${formatClock(elapsed)} of ${formatClock(needed)}`}
        </span>
      )}
    </div>
  );
}

/** Minutes since the step began, and how long it may last. */
function Timer({ clock, now }: { clock: StepClock; now: number }) {
  const { begunAt, endedAt, step } = clock;
  if (begunAt === null || endedAt !== null) return null;
  const seconds = Math.max(0, Math.floor((now - begunAt) / 1000));
  const most = step.maximumMinutes === undefined ? null : step.maximumMinutes * 60;
  return (
    <p className="flex flex-wrap items-baseline gap-3">
      <span className="text-3xl text-soot tabular-nums">{formatClock(seconds)}</span>
      {most !== null && <span className="text-ink-soft">of at most {formatClock(most)}</span>}
      {most !== null && seconds >= 0.9 * most && (
        <StateMark
          state="asks"
          word={seconds >= most ? 'over the longest time' : 'nearly at the longest time'}
        />
      )}
    </p>
  );
}

function nextPress({ step, begunAt, endedAt, skipped }: StepClock): { kind: StepEventKind; label: string }[] {
  if (skipped || endedAt !== null) return [];
  if (begunAt === null) {
    if (step.event !== undefined && step.instrument === undefined)
      return [{ kind: 'stamped', label: `Stamp: ${step.event}` }];
    return [{ kind: 'begun', label: 'Begin this step' }];
  }
  return [{ kind: 'ended', label: endLabel(step) }];
}

const endLabel = (step: RunSheetStep): string =>
  step.event === undefined ? 'End this step' : `Stamp: ${step.event}`;
