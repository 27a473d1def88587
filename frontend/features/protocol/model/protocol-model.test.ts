import { describe, expect, it } from 'vitest';
import { reedgrip } from '#schemas/protocol/demo/reedgrip.ts';
import { withBlocksWrittenOut } from '#schemas/protocol/run-sheet.ts';
import type { VisitType } from '#schemas/protocol/protocol.ts';
import { anchoredSteps, holdPointInWords, windowInWords } from './protocol-words.ts';
import { visitLine } from './visit-line.ts';

const visit = (key: string, targetDay: number, windowBefore: number, windowAfter: number): VisitType => ({
  key,
  label: key,
  targetDay,
  windowBefore,
  windowAfter,
  runSheet: [],
  measures: [],
});

describe('the line of visits', () => {
  it('knows no day 0: day −1 lies right before day 1', () => {
    const { bars, length } = visitLine([visit('before', -1, 0, 0), visit('first', 1, 0, 0)]);
    expect(bars.map(({ key, from, to }) => [key, from, to])).toEqual([
      ['before', 0, 1],
      ['first', 1, 2],
    ]);
    expect(length).toBe(2);
  });

  it('draws each window with its target, and names that would meet in rows of their own', () => {
    const { bars, rows, ticks } = visitLine([visit('a', 1, 0, 2), visit('b', 5, 1, 1), visit('c', 60, 3, 3)]);
    expect(bars.map(({ key, from, target, to, row }) => [key, from, target, to, row])).toEqual([
      ['a', 0, 0, 3, 0],
      ['b', 3, 4, 6, 1],
      ['c', 56, 59, 63, 0],
    ]);
    expect(rows).toBe(2);
    expect(ticks[0]).toEqual({ day: 1, at: 0 });
    expect(ticks.every(({ day, at }) => day === at + 1)).toBe(true);
  });
});

describe('a run sheet in words', () => {
  const { runSheet } = withBlocksWrittenOut(
    reedgrip.visitTypes.find(({ key }) => key === 'first-test') ?? expect.fail('no first test'),
  );

  it('is divided where the minutes begin to count from another moment', () => {
    const groups = anchoredSteps(runSheet);
    expect(groups.slice(0, 3).map(({ from, steps }) => [from, steps[0]?.key])).toEqual([
      ['From the start of the visit', 'checks'],
      ['From “Rest began” of Rest, supine', 'pressures'],
      ['From “Rest recorded” of Doppler at rest, before the juice', 'exercise-before'],
    ]);
    expect(groups.flatMap(({ steps }) => steps.map(({ key }) => key))).toEqual(
      runSheet.map(({ key }) => key),
    );
  });

  it('says what a step waits for, and how early or late a visit may be', () => {
    const held = runSheet.find(({ holdPoint }) => holdPoint !== undefined);
    expect(holdPointInWords(held!.holdPoint!, runSheet)).toBe('waits until 150 min after Juice drunk');
    expect(windowInWords(visit('x', -7, 14, 1))).toBe('day −7, 14 days early to 1 day late');
    expect(windowInWords(visit('x', 1, 0, 0))).toBe('day 1, that day only');
  });
});
