import type { VisitType } from '#schemas/protocol/protocol.ts';

/** A visit on the line of study days, in days since the first day shown. */
export interface VisitBar {
  key: string;
  label: string;
  from: number;
  target: number;
  to: number;
  /** The row it is drawn in, so that windows side by side do not cover each other's names. */
  row: number;
}

export interface VisitLine {
  bars: VisitBar[];
  /** Length of the line in days. */
  length: number;
  rows: number;
  /** Study days marked on the axis, with their place. */
  ticks: { day: number; at: number }[];
}

/** Days since day 1: day −1 stands right before day 1, there is no day 0. */
const elapsed = (studyDay: number): number => (studyDay < 0 ? studyDay : studyDay - 1);
const studyDayOf = (days: number): number => (days < 0 ? days : days + 1);

/** Lays the windows of visits along study days, each in the first row with room for it. */
export function visitLine(visitTypes: readonly VisitType[]): VisitLine {
  const spans = visitTypes
    .map(({ key, label, targetDay, windowBefore, windowAfter }) => {
      const target = elapsed(targetDay);
      return { key, label, from: target - windowBefore, target, to: target + windowAfter + 1 };
    })
    .sort((a, b) => a.from - b.from);
  const first = Math.min(...spans.map(({ from }) => from));
  const length = Math.max(...spans.map(({ to }) => to)) - first;
  const ends: number[] = [];
  const bars = spans.map((span): VisitBar => {
    // A name takes room to the right of its window: about a sixth of the line.
    const needed = Math.max(span.to, span.from + length / 6);
    const free = ends.findIndex((end) => end <= span.from);
    const row = free === -1 ? ends.length : free;
    ends[row] = needed;
    return { ...span, from: span.from - first, target: span.target - first, to: span.to - first, row };
  });
  return { bars, length, rows: ends.length, ticks: ticksOf(first, length) };
}

function ticksOf(first: number, length: number): VisitLine['ticks'] {
  const step = [1, 7, 14, 28, 56, 91, 182, 364].find((days) => length / days <= 12) ?? 728;
  const ticks: VisitLine['ticks'] = [];
  for (let days = Math.ceil(first / step) * step; days <= first + length; days += step) {
    ticks.push({ day: studyDayOf(days), at: days - first });
  }
  return ticks;
}
