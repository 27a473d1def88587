import { describe, expect, it } from 'vitest';
import { formatAge, formatClock, formatDate, formatMoment, formatTime, zoneOffset } from './dates.ts';
import { instantAt, wallTimeOf } from './zones.ts';

describe('dates and times in a zone', () => {
  it('shows the day and the time of the site, and its offset', () => {
    expect(formatMoment('2026-03-14T14:05:17Z', 'America/Lima')).toBe('2026-03-14 09:05 (UTC−5)');
    expect(formatTime('2026-03-14T14:05:17Z', 'America/Lima', { seconds: true })).toBe('09:05:17');
    expect(formatDate('2026-03-15T02:00:00Z', 'America/Lima')).toBe('2026-03-14');
  });

  it('follows the zone through summer time', () => {
    expect(zoneOffset('2026-01-10T12:00:00Z', 'Europe/Zurich')).toBe('UTC+1');
    expect(zoneOffset('2026-07-10T12:00:00Z', 'Europe/Zurich')).toBe('UTC+2');
    expect(zoneOffset('2026-07-10T12:00:00Z', 'UTC')).toBe('UTC');
    expect(zoneOffset('2026-07-10T12:00:00Z', 'Asia/Kolkata')).toBe('UTC+5:30');
  });

  it('leaves a day without a time as it is, wherever it is read', () => {
    expect(formatDate('2026-03-14', 'America/Lima')).toBe('2026-03-14');
  });

  it('counts how long ago by the largest whole unit', () => {
    const now = Date.parse('2026-03-17T12:00:00Z');
    expect(formatAge('2026-03-17T11:48:00Z', now)).toBe('12 min');
    expect(formatAge('2026-03-17T08:30:00Z', now)).toBe('3 h');
    expect(formatAge('2026-03-16T11:00:00Z', now)).toBe('1 day');
    expect(formatAge('2026-03-11T11:00:00Z', now)).toBe('6 days');
    expect(formatAge('2026-03-18T11:00:00Z', now)).toBe('0 min');
  });

  it('shows a running time', () => {
    expect(formatClock(134)).toBe('02:14');
    expect(formatClock(3734)).toBe('1:02:14');
    expect(formatClock(-3)).toBe('00:00');
  });
});

describe('instantAt', () => {
  it('gives the instant of a wall clock with the offset of that day', () => {
    expect(instantAt('2026-03-14T09:05', 'America/Lima')).toBe('2026-03-14T09:05:00-05:00');
    expect(instantAt('2026-07-01T09:05', 'Europe/Zurich')).toBe('2026-07-01T09:05:00+02:00');
    expect(instantAt('2026-01-01T09:05', 'Asia/Kolkata')).toBe('2026-01-01T09:05:00+05:30');
  });

  it('takes the first of a time that comes twice, and moves one that is left out', () => {
    // Zurich: back at 03:00 on 25 October, forward at 02:00 on 29 March 2026 (IANA time zone database).
    expect(instantAt('2026-10-25T02:30', 'Europe/Zurich')).toBe('2026-10-25T02:30:00+02:00');
    expect(instantAt('2026-03-29T02:30', 'Europe/Zurich')).toBe('2026-03-29T03:30:00+02:00');
    expect(instantAt('2026-10-25T12:00', 'Europe/Zurich')).toBe('2026-10-25T12:00:00+01:00');
  });

  it('is undone by wallTimeOf', () => {
    for (const wall of ['2026-03-28T23:15', '2026-03-29T04:00', '2026-10-25T03:30', '2026-12-31T23:59']) {
      expect(wallTimeOf(instantAt(wall, 'Europe/Zurich'), 'Europe/Zurich')).toBe(wall);
    }
  });
});
