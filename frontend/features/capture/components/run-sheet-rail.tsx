import type { RunSheetStep } from '#schemas/protocol/protocol.ts';
import { PenMark, type PenState } from '../../../components/pen-mark.tsx';
import { classNames } from '../../../components/class-names.ts';
import { formatTime } from '../../../lib/format/dates.ts';
import type { StepClock } from '../model/step-clock.ts';

interface RunSheetRailProps {
  clocks: readonly StepClock[];
  entryStates: ReadonlyMap<string, string>;
  chosen: string;
  zone: string;
  onChoose: (stepKey: string) => void;
}

/** The visit's steps on a vertical time rail: planned and actual minutes, each from its own anchor. */
export function RunSheetRail({ clocks, entryStates, chosen, zone, onChoose }: RunSheetRailProps) {
  return (
    <nav aria-label="Steps of this visit" className="rounded-md border border-rule bg-paper">
      <ol>
        {clocks.map((clock) => {
          const { step, planned, actual, begunAt } = clock;
          const [mark, word] = stateOf(clock, entryStates.get(step.key));
          return (
            <li key={step.key}>
              <button
                type="button"
                aria-current={step.key === chosen ? 'step' : undefined}
                onClick={() => onChoose(step.key)}
                className={classNames(
                  'grid min-h-11 w-full grid-cols-[4.25rem_1.5rem_1fr] items-baseline gap-x-2 px-3 py-2.5 text-left',
                  step.key === chosen ? 'bg-arterial-wash' : 'hover:bg-bone',
                )}
              >
                <span className="text-right tabular-nums">
                  <span className={begunAt === null ? 'sr-only' : 'font-semibold text-soot'}>
                    {begunAt === null ? 'not begun, ' : formatTime(new Date(begunAt).toISOString(), zone)}
                  </span>
                  <span className="block text-sm text-ink-soft">+{planned} min</span>
                </span>
                <PenMark state={mark} />
                <span>
                  <span className={step.key === chosen ? 'font-semibold text-soot' : undefined}>
                    {step.label}
                  </span>
                  <span className="block text-sm text-ink-soft">
                    {[
                      word,
                      lateness(actual, planned),
                      anchorWords(step, clocks),
                      performerWords(step.performedBy),
                    ]
                      .filter(Boolean)
                      .join(' · ')}
                  </span>
                </span>
              </button>
            </li>
          );
        })}
      </ol>
    </nav>
  );
}

/** The event that a step's minutes count from, where it is not the beginning of the visit. */
const anchorWords = ({ anchor }: RunSheetStep, clocks: readonly StepClock[]): string | null =>
  anchor.kind === 'visit-start'
    ? null
    : `after: ${clocks.find(({ step }) => step.key === anchor.step)?.step.label ?? anchor.step}`;

const performerWords = (performer: string): string | null =>
  performer === 'coordinator' ? null : performer.replaceAll('-', ' ');

function lateness(actual: number | null, planned: number): string | null {
  if (actual === null || Math.abs(actual - planned) < 2) return null;
  return actual > planned ? `${actual - planned} min late` : `${planned - actual} min early`;
}

function stateOf(clock: StepClock, entryState: string | undefined): [PenState, string] {
  if (clock.skipped) return ['late', 'skipped'];
  if (entryState === 'complete') return ['settled', 'complete'];
  if (entryState === 'open') return ['underway', 'under way'];
  if (clock.endedAt !== null) return ['settled', 'done'];
  if (clock.begunAt !== null)
    return clock.step.instrument === undefined ? ['settled', 'stamped'] : ['underway', 'under way'];
  return ['todo', 'to do'];
}
