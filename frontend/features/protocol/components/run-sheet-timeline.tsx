import { Link } from 'react-router-dom';
import type { ProtocolVersionDto } from '#schemas/api/protocol.ts';
import type { RunSheetStep, VisitType } from '#schemas/protocol/protocol.ts';
import { withBlocksWrittenOut } from '#schemas/protocol/run-sheet.ts';
import { cautionClosing, cautionTexts } from '#schemas/vocabulary/caution-texts.ts';
import { Caution } from '#frontend/components/caution.tsx';
import { anchoredSteps, holdPointInWords, performerWords, windowInWords } from '../model/protocol-words.ts';

type Instruments = ProtocolVersionDto['instruments'];

interface RunSheetTimelineProps {
  visitType: VisitType;
  instruments: Instruments;
  instrumentPath: string;
}

/** A visit's steps as they come, each with its minutes, who does it, what it waits for and what it fills in. */
export function RunSheetTimeline({ visitType, instruments, instrumentPath }: RunSheetTimelineProps) {
  const { runSheet } = withBlocksWrittenOut(visitType);
  return (
    <section className="flex flex-col gap-3 border-t px-4 py-4 first:border-t-0">
      <header className="flex flex-wrap items-baseline gap-x-3">
        <h2 className="text-base">{visitType.label}</h2>
        <span className="text-sm text-ink-soft">{windowInWords(visitType)}</span>
      </header>
      {anchoredSteps(runSheet).map((group) => (
        <div key={group.key}>
          <h3 className="text-sm font-medium text-ink-soft">{group.from}</h3>
          <ol className="mt-1 flex flex-col">
            {group.steps.map((step) => (
              <li
                key={step.key}
                className="grid gap-x-4 gap-y-1 border-b border-rule-soft py-2 sm:grid-cols-[11rem_minmax(0,1fr)_11rem]"
              >
                <Minutes step={step} scale={group.minutes} />
                <StepWords
                  step={step}
                  steps={runSheet}
                  instruments={instruments}
                  instrumentPath={instrumentPath}
                />
                <span className="text-sm text-ink-soft sm:text-right">
                  {performerWords[step.performedBy]}
                </span>
              </li>
            ))}
          </ol>
        </div>
      ))}
      {runSheet.some(({ caution }) => caution !== undefined) && (
        <p className="text-sm text-ink-soft">{cautionClosing}</p>
      )}
      {runSheet.length === 0 && <p className="text-ink-soft">No step yet.</p>}
    </section>
  );
}

/** `10–15 min` over a bar on the group's scale. */
function Minutes({ step, scale }: { step: RunSheetStep; scale: number }) {
  const { plannedMinute, durationMinutes } = step;
  const share = (minutes: number): string => `${(100 * minutes) / Math.max(1, scale)}%`;
  return (
    <span className="flex flex-col gap-1 text-sm">
      <span>
        {durationMinutes === 0 ? plannedMinute : `${plannedMinute}–${plannedMinute + durationMinutes}`} min
      </span>
      <span aria-hidden className="relative h-1.5 rounded-sm bg-rule-soft">
        <span
          className="absolute inset-y-0 min-w-1 rounded-sm bg-venous"
          style={{ left: share(plannedMinute), width: share(durationMinutes) }}
        />
      </span>
    </span>
  );
}

interface StepWordsProps {
  step: RunSheetStep;
  steps: readonly RunSheetStep[];
  instruments: Instruments;
  instrumentPath: string;
}

function StepWords({ step, steps, instruments, instrumentPath }: StepWordsProps) {
  const instrument = instruments.find(({ key }) => key === step.instrument);
  const caution =
    step.caution === undefined ? undefined : cautionTexts[step.caution as keyof typeof cautionTexts];
  const notes = [
    ...(step.event === undefined ? [] : [`stamps “${step.event}”`]),
    ...(step.maximumMinutes === undefined ? [] : [`${step.maximumMinutes} min at most`]),
  ];
  return (
    <div className="flex min-w-0 flex-col gap-1">
      <p className="flex flex-wrap items-baseline gap-x-3">
        <span className="font-medium">{step.label}</span>
        {step.instrument !== undefined && (
          <Link to={`${instrumentPath}/${step.instrument}`} className="text-sm link">
            {instrument?.title ?? step.instrument}
          </Link>
        )}
      </p>
      {step.holdPoint && (
        <p className="text-sm">
          <span className="font-medium">Hold point</span>, {holdPointInWords(step.holdPoint, steps)}
        </p>
      )}
      {notes.length > 0 && <p className="text-sm text-ink-soft">{notes.join(' · ')}</p>}
      {step.instructions !== undefined && <p className="max-w-prose text-sm">{step.instructions}</p>}
      {caution && <Caution title={caution.title}>{caution.text}</Caution>}
    </div>
  );
}
