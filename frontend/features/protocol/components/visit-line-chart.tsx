import { useId } from 'react';
import type { VisitType } from '#schemas/protocol/protocol.ts';
import { dayInWords, windowInWords } from '../model/protocol-words.ts';
import { visitLine } from '../model/visit-line.ts';

const width = 1000;
const rowHeight = 40;
const axisHeight = 30;

/** The windows of the visits on the line of study days, and the same as a table. */
export function VisitLineChart({ visitTypes }: { visitTypes: readonly VisitType[] }) {
  const titleId = useId();
  const { bars, length, rows, ticks } = visitLine(visitTypes);
  const x = (days: number): number => 8 + (days / length) * (width - 16);
  const height = rows * rowHeight + axisHeight;
  return (
    <figure className="flex flex-col gap-3">
      <div className="overflow-x-auto">
        <svg
          viewBox={`0 0 ${width} ${height}`}
          role="img"
          aria-labelledby={titleId}
          className="w-full min-w-160"
        >
          <title id={titleId}>
            {`${visitTypes.length} visits on the line of study days: ${visitTypes
              .map((visit) => `${visit.label}, ${windowInWords(visit)}`)
              .join('; ')}.`}
          </title>
          {ticks.map(({ day, at }) => (
            <g key={day}>
              <line x1={x(at)} x2={x(at)} y1={0} y2={height - axisHeight} className="stroke-rule-soft" />
              <text x={x(at)} y={height - 10} textAnchor="middle" className="fill-ink-soft text-[13px]">
                {dayInWords(day)}
              </text>
            </g>
          ))}
          <line
            x1={8}
            x2={width - 8}
            y1={height - axisHeight}
            y2={height - axisHeight}
            className="stroke-edge"
          />
          {bars.map(({ key, label, from, target, to, row }) => (
            <g key={key}>
              <rect
                x={x(from)}
                y={row * rowHeight + 20}
                width={Math.max(4, x(to) - x(from))}
                height={12}
                rx={3}
                className="fill-venous-wash stroke-venous"
              />
              <line
                x1={x(target + 0.5)}
                x2={x(target + 0.5)}
                y1={row * rowHeight + 16}
                y2={row * rowHeight + 36}
                strokeWidth={2.5}
                className="stroke-venous"
              />
              <text x={x(from)} y={row * rowHeight + 13} className="fill-ink text-[14px]">
                {label}
              </text>
            </g>
          ))}
        </svg>
      </div>
      <figcaption className="text-sm text-ink-soft">
        Study days; day 1 is the day of reference and there is no day 0. The bar is the window, the stroke in
        it the target.
      </figcaption>
    </figure>
  );
}
