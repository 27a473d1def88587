import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  addDays,
  dateOfStudyDay,
  daysBetween,
  daysOutside,
  isCalendarDay,
  studyDay,
  visitWindow,
} from './visit-window.ts';

describe('a study day', () => {
  it('is 1 on the day of reference and -1 on the day before: there is no day 0', () => {
    expect(studyDay('2026-03-10', '2026-03-10')).toBe(1);
    expect(studyDay('2026-03-09', '2026-03-10')).toBe(-1);
    expect(studyDay('2026-03-11', '2026-03-10')).toBe(2);
    expect(() => dateOfStudyDay(0, '2026-03-10')).toThrow(RangeError);
  });

  it('counts days of the calendar, through leap days and changes of the clock', () => {
    expect(addDays('2028-02-28', 1)).toBe('2028-02-29');
    expect(addDays('2026-02-28', 1)).toBe('2026-03-01');
    expect(daysBetween('2026-03-28', '2026-03-30')).toBe(2); // European clocks go forward on the 29th.
    expect(daysBetween('2025-12-31', '2026-01-01')).toBe(1);
  });

  it('comes back as the same date, and never as 0', () => {
    const days = fc.integer({ min: -2000, max: 2000 }).filter((day) => day !== 0);
    fc.assert(
      fc.property(days, (day) => {
        expect(studyDay(dateOfStudyDay(day, '2026-03-10'), '2026-03-10')).toBe(day);
      }),
    );
  });
});

describe('a visit window', () => {
  const period2 = { targetDay: 85, windowBefore: 3, windowAfter: 7 };

  it('lies about the target day (12 weeks after day 1 is day 85)', () => {
    expect(visitWindow(period2, '2026-01-05')).toEqual({
      target: '2026-03-30',
      earliest: '2026-03-27',
      latest: '2026-04-06',
    });
  });

  it('reaches from day 1 back over the missing day 0', () => {
    expect(visitWindow({ targetDay: 1, windowBefore: 1, windowAfter: 0 }, '2026-01-05').earliest).toBe(
      '2026-01-04',
    );
  });

  it('says how far outside a date lies', () => {
    const window = visitWindow(period2, '2026-01-05');
    expect(
      ['2026-03-26', '2026-03-27', '2026-04-06', '2026-04-09'].map((date) => daysOutside(window, date)),
    ).toEqual([-1, 0, 0, 3]);
  });
});

it.each(['2026-02-30', '2026-13-01', '26-01-01', '2026-1-1', 'soon', ''])(
  '%s is no day of the calendar',
  (text) => {
    expect(isCalendarDay(text)).toBe(false);
    expect(() => daysBetween(text, '2026-01-01')).toThrow(RangeError);
  },
);
