import type { VisitDto } from '#schemas/api/capture.ts';

export interface RibbonVisit {
  visit: VisitDto;
  /** Study days, counted from the participant's first planned visit (day 0). */
  windowFrom: number;
  windowTo: number;
  /** The day it took place; while it has not, the day it is planned for. */
  on: number;
  /** Where that day lies by its window. */
  timing: 'early' | 'inside' | 'late';
}

export interface RibbonRow {
  participantId: string;
  participantCode: string;
  visits: RibbonVisit[];
}

export interface Ribbon {
  rows: RibbonRow[];
  /** The first and last study day of any window or visit. */
  first: number;
  last: number;
}

const dayNumber = (day: string): number => Math.round(Date.parse(day.slice(0, 10)) / 86_400_000);

/** Lays visits out by participant on study days, so that studies of many months read as one picture. */
export function ribbonOf(visits: readonly VisitDto[]): Ribbon {
  const byParticipant = new Map<string, VisitDto[]>();
  for (const visit of visits) {
    const own = byParticipant.get(visit.participantId) ?? [];
    own.push(visit);
    byParticipant.set(visit.participantId, own);
  }
  const rows = [...byParticipant.entries()]
    .map(([participantId, own]) => rowOf(participantId, own))
    .sort((a, b) => a.participantCode.localeCompare(b.participantCode));
  let first = 0;
  let last = 1;
  for (const { visits: own } of rows) {
    for (const { windowFrom, windowTo, on } of own) {
      first = Math.min(first, windowFrom, on);
      last = Math.max(last, windowTo, on);
    }
  }
  return { rows, first, last };
}

function rowOf(participantId: string, own: readonly VisitDto[]): RibbonRow {
  const zero = Math.min(...own.map(({ plannedOn }) => dayNumber(plannedOn)));
  return {
    participantId,
    participantCode: own[0]?.participantCode ?? '',
    visits: own.map((visit) => {
      const windowFrom = dayNumber(visit.windowFrom) - zero;
      const windowTo = dayNumber(visit.windowTo) - zero;
      const on = dayNumber(visit.startedAt ?? visit.plannedOn) - zero;
      return {
        visit,
        windowFrom,
        windowTo,
        on,
        timing: on < windowFrom ? 'early' : on > windowTo ? 'late' : 'inside',
      };
    }),
  };
}

/** Round study days for the axis: a step that gives at most ten. */
export function axisDays({ first, last }: Pick<Ribbon, 'first' | 'last'>): number[] {
  const steps = [1, 2, 7, 14, 28, 56, 91, 182, 364, 728];
  const step = steps.find((days) => (last - first) / days <= 10) ?? 3640;
  const days: number[] = [];
  // Adding nothing turns minus zero into zero.
  for (let day = Math.ceil(first / step) * step + 0; day <= last; day += step) days.push(day);
  return days;
}
