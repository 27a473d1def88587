import { useVirtualizer } from '@tanstack/react-virtual';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import { PenMark } from '../../../components/pen-mark.tsx';
import { axisDays, type Ribbon, type RibbonRow, type RibbonVisit } from '../model/ribbon.ts';
import { visitLook } from './visit-look.ts';

const rowHeight = 34;

interface RibbonChartProps {
  study: string;
  ribbon: Ribbon;
}

/** A row a participant on an axis of study days; each visit's mark stands inside its window, or outside of it. */
export function RibbonChart({ study, ribbon }: RibbonChartProps) {
  const [scroller, setScroller] = useState<HTMLDivElement | null>(null);
  const { rows, first, last } = ribbon;
  const share = (day: number): string => `${(((day - first) / (last - first)) * 100).toFixed(3)}%`;
  // The compiler that this rule speaks for is not in use here.
  // eslint-disable-next-line react-hooks/incompatible-library
  const virtualizer = useVirtualizer({
    count: rows.length,
    getScrollElement: () => scroller,
    estimateSize: () => rowHeight,
    overscan: 10,
  });
  return (
    <div
      ref={setScroller}
      // A scrolling region is reached by keyboard.
      // eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex
      tabIndex={0}
      role="region"
      aria-label="Visit ribbon"
      className="max-h-[70vh] overflow-auto"
    >
      <div className="min-w-160">
        <div className="sticky top-0 z-10 flex border-b bg-paper text-sm text-ink-soft" aria-hidden>
          <span className="w-32 shrink-0 px-4 py-1">Study day</span>
          <span className="relative mr-8 flex-1">
            {axisDays(ribbon).map((day) => (
              <span key={day} className="absolute -translate-x-1/2 py-1" style={{ left: share(day) }}>
                {day}
              </span>
            ))}
          </span>
        </div>
        <ul className="relative" style={{ height: virtualizer.getTotalSize() }}>
          {virtualizer.getVirtualItems().map(({ index, start }) => {
            const row = rows[index];
            return (
              row && (
                <li
                  key={row.participantId}
                  className="absolute inset-x-0 flex items-center border-b border-rule-soft"
                  style={{ height: rowHeight, transform: `translateY(${start}px)` }}
                >
                  <Row study={study} row={row} share={share} />
                </li>
              )
            );
          })}
        </ul>
      </div>
    </div>
  );
}

interface RowProps {
  study: string;
  row: RibbonRow;
  share: (day: number) => string;
}

function Row({ study, row: { participantCode, visits }, share }: RowProps) {
  return (
    <>
      <Link
        to={`/studies/${study}/participants/${encodeURIComponent(participantCode)}`}
        className="w-32 shrink-0 px-4 font-mono text-sm"
      >
        {participantCode}
      </Link>
      <span className="relative mr-8 h-full flex-1">
        {visits.map(({ visit, windowFrom, windowTo }) => (
          <span
            key={visit.id}
            aria-hidden
            className="absolute top-2 bottom-2 rounded-sm border border-rule bg-rule-soft"
            style={{ left: share(windowFrom), right: `calc(100% - ${share(windowTo)})` }}
          />
        ))}
        {visits.map((placed) => (
          <Link
            key={placed.visit.id}
            to={`/studies/${study}/visits/${placed.visit.id}`}
            title={wordsOf(placed)}
            aria-label={`${participantCode}, ${wordsOf(placed)}`}
            className="absolute top-1/2 flex size-6 -translate-1/2 items-center justify-center text-ink"
            style={{ left: share(placed.on) }}
          >
            <PenMark state={visitLook(placed.visit).state} />
          </Link>
        ))}
      </span>
    </>
  );
}

function wordsOf({ visit, on, timing }: RibbonVisit): string {
  const outside = timing === 'inside' ? '' : `, ${timing}`;
  return `${visit.label}: ${visitLook(visit).word}${outside}, day ${on}, window ${visit.windowFrom} to ${visit.windowTo}`;
}
