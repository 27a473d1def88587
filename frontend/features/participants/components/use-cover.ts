import { useEffect, useRef } from 'react';
import type { IdentifiersDto } from '#schemas/api/participants.ts';

/** Minutes after which what is shown is covered, so that an unattended screen does not go on telling. */
const shownMinutes = 5;

/** Identifiers on the screen, and when they are covered again. */
export interface Shown {
  identifiers: IdentifiersDto;
  coverAt: Date;
}

/** Covered at the end of an urgent look, or some minutes from now, whichever is first. */
export function shownNow(identifiers: IdentifiersDto): Shown {
  const usual = Date.now() + shownMinutes * 60_000;
  const { until } = identifiers;
  return { identifiers, coverAt: new Date(until === null ? usual : Math.min(Date.parse(until), usual)) };
}

/** Covers them when their time has come. */
export function useCoveredLater(shown: Shown | undefined, cover: () => void) {
  const latest = useRef(cover);
  useEffect(() => {
    latest.current = cover;
  });
  useEffect(() => {
    if (shown === undefined) return undefined;
    const timer = setTimeout(() => latest.current(), Math.max(0, shown.coverAt.getTime() - Date.now()));
    return () => clearTimeout(timer);
  }, [shown]);
}
