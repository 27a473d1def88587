import { formatDate, formatTime } from './dates.ts';

/** What the clock on the wall shows at an instant: `2026-03-14T09:05`, in a zone (without one, this device's). */
export const wallTimeOf = (instant: string, zone?: string): string =>
  `${formatDate(instant, zone)}T${formatTime(instant, zone)}`;

/**
 * The instant at which the clock on the wall shows a time, with the zone's offset then: `2026-03-14T09:05:00-05:00`.
 * Of a time that comes twice, the first; one that is left out is moved on by the length of the gap, as clocks are.
 */
export function instantAt(wall: string, zone?: string): string {
  const seconds = wall.length === 16 ? `${wall}:00` : wall;
  const asUtc = Date.parse(`${seconds}Z`);
  // The offset before the change is tried first: it gives the first of two, and steps over a gap.
  const before = offsetMinutes(asUtc - 24 * 3600_000, zone);
  const candidate = asUtc - before * 60_000;
  const offset = offsetMinutes(candidate, zone);
  const instant = offset === before ? candidate : settled(asUtc, before, offset, zone);
  return withOffset(instant, offsetMinutes(instant, zone));
}

function settled(asUtc: number, before: number, after: number, zone: string | undefined): number {
  const later = asUtc - after * 60_000;
  return offsetMinutes(later, zone) === after ? later : asUtc - before * 60_000;
}

function offsetMinutes(at: number, zone: string | undefined): number {
  const instant = new Date(at).toISOString();
  const wall = `${formatDate(instant, zone)}T${formatTime(instant, zone, { seconds: true })}Z`;
  return Math.round((Date.parse(wall) - Math.floor(at / 1000) * 1000) / 60_000);
}

function withOffset(at: number, offset: number): string {
  const local = new Date(at + offset * 60_000).toISOString().slice(0, 19);
  const two = (part: number) => String(part).padStart(2, '0');
  const size = Math.abs(offset);
  return `${local}${offset < 0 ? '-' : '+'}${two(Math.floor(size / 60))}:${two(size % 60)}`;
}
