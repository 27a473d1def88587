import type { VisitType } from '#schemas/protocol/protocol.ts';
import { dayInWords, windowInWords } from '../model/protocol-words.ts';
import { visitLine, type VisitBar } from '../model/visit-line.ts';

const rowHeight = 44;
const axisHeight = 26;

/** The windows of the visits on the line of study days; the table below it says the same. */
export function VisitLineChart({ visitTypes }: { visitTypes: readonly VisitType[] }) {
  const { bars, length, rows, ticks } = visitLine(visitTypes);
  const share = (days: number): string => `${(100 * days) / length}%`;
  const said = visitTypes.map((visit) => `${visit.label}, ${windowInWords(visit)}`).join('; ');
  return (
    <figure className="flex flex-col gap-2">
      {/* Laid out in shares of the width, so that its words keep their size on a tablet. */}
      <div
        role="img"
        aria-label={`${visitTypes.length} visits on the line of study days: ${said}.`}
        className="relative mx-4"
        style={{ height: rows * rowHeight + axisHeight }}
      >
        {ticks.map(({ day, at }) => (
          <span
            key={day}
            className="absolute inset-y-0 w-px bg-rule-soft"
            style={{ left: share(at), bottom: axisHeight }}
          >
            <span className="absolute top-full -translate-x-1/2 pt-1 text-sm text-ink-soft">
              {dayInWords(day)}
            </span>
          </span>
        ))}
        <span className="absolute inset-x-0 h-px bg-edge" style={{ bottom: axisHeight }} />
        {bars.map((bar) => (
          <Bar key={bar.key} bar={bar} length={length} share={share} />
        ))}
      </div>
      <figcaption className="text-sm text-ink-soft">
        Study days; day 1 is the day of reference and there is no day 0. The bar is the window, the stroke in
        it the target.
      </figcaption>
    </figure>
  );
}

interface BarProps {
  bar: VisitBar;
  length: number;
  share: (days: number) => string;
}

function Bar({ bar: { label, from, target, to, row }, length, share }: BarProps) {
  const nearTheEnd = from / length > 0.8;
  return (
    <>
      <span
        className="absolute text-sm whitespace-nowrap"
        style={{
          top: row * rowHeight,
          ...(nearTheEnd ? { right: share(length - to) } : { left: share(from) }),
        }}
      >
        {label}
      </span>
      <span
        className="absolute h-3 min-w-1 rounded-sm border border-venous bg-venous-wash"
        style={{ top: row * rowHeight + 23, left: share(from), width: share(to - from) }}
      />
      <span
        className="absolute h-5 w-0.5 -translate-x-1/2 bg-venous"
        style={{ top: row * rowHeight + 19, left: share(target + 0.5) }}
      />
    </>
  );
}
