import { describe, expect, it } from 'vitest';
import { summariseReadings } from './reading-rule.ts';
import { smallestDetectableChange } from './smallest-detectable-change.ts';
import { mean, median, standardDeviation } from './summaries.ts';
import { withinSubjectDeviation } from './within-subject-deviation.ts';

const values = (...numbers: number[]) => numbers.map((value) => ({ value }));
const rejected = (value: number) => ({ value, accepted: false });

describe('reading rules', () => {
  it('take the last five accepted, reaching back past a rejected one', () => {
    const block = [...values(9, 2, 3, 4), rejected(99), ...values(5, 6)];
    const rule = { kind: 'last', count: 5, replaceRejected: true } as const;
    expect(summariseReadings(rule, block)).toMatchObject({ value: 4, used: [1, 2, 3, 5, 6], n: 5 });
  });

  it('or shrink when the protocol does not replace', () => {
    const block = [...values(9, 2, 3, 4), rejected(99), ...values(5, 6)];
    const rule = { kind: 'last', count: 5, replaceRejected: false } as const;
    expect(summariseReadings(rule, block)).toMatchObject({ value: 4.5, used: [2, 3, 5, 6], n: 4 });
  });

  it('leave the first cuff pressure out and ask for one more when two differ', () => {
    const rule = { kind: 'without-first', apart: 5 } as const;
    expect(summariseReadings(rule, values(140, 120, 125))).toMatchObject({
      value: 122.5,
      used: [1, 2],
      oneMore: false,
    });
    expect(summariseReadings(rule, values(140, 120, 126))).toMatchObject({ oneMore: true });
    expect(summariseReadings(rule, values(140, 120, 126, 123))).toMatchObject({
      value: 123,
      n: 3,
      oneMore: false,
    });
    expect(() => summariseReadings(rule, values(140, 120))).toThrow(/readings/);
  });

  it('average two tubes and take the median of three', () => {
    const rule = { kind: 'duplicate', apart: 0.01 } as const;
    expect(summariseReadings(rule, values(0.42, 0.43))).toMatchObject({ value: 0.425, oneMore: false });
    expect(summariseReadings(rule, values(0.42, 0.432))).toMatchObject({ oneMore: true });
    expect(summariseReadings(rule, values(0.42, 0.44, 0.435))).toMatchObject({
      value: 0.435,
      oneMore: false,
    });
    expect(() => summariseReadings(rule, values(0.42))).toThrow(/readings/);
  });

  it('report the spread with n − 1', () => {
    const summary = summariseReadings({ kind: 'mean' }, values(2.4, 2.6, 2.5, 2.7, 2.3));
    expect(summary.standardDeviation).toBeCloseTo(Math.sqrt(0.025), 12);
    expect(summary.coefficientOfVariationPercent).toBeCloseTo(6.32455532, 7);
    expect(summariseReadings({ kind: 'mean' }, values(2.4)).standardDeviation).toBeUndefined();
  });

  it('refuse when nothing was accepted or a reading is no number', () => {
    expect(() => summariseReadings({ kind: 'mean' }, [rejected(1)])).toThrow(/readings/);
    expect(() => summariseReadings({ kind: 'mean' }, values(1, NaN))).toThrow(/readings\[2\]/);
  });
});

describe('summaries', () => {
  it('keep their digits beside a large offset', () => {
    const small = [1, 2, 4, 7];
    const shifted = small.map((value) => value + 1e9);
    expect(mean(shifted) - 1e9).toBe(3.5);
    expect(standardDeviation(shifted)).toBeCloseTo(standardDeviation(small), 12);
  });

  it('find the middle', () => {
    expect(median([3, 1, 2])).toBe(2);
    expect(median([4, 1, 2, 3])).toBe(2.5);
    expect(() => median([])).toThrow(/values/);
  });
});

describe('detectable change', () => {
  it('of pairs is √(Σd²/2n)', () => {
    // Differences 0.2, 0.1 and 0.4: √(0.21/6)
    const { deviation, df } = withinSubjectDeviation([[1, 1.2], [2, 2.1], [3, 3.4], [5]]);
    expect(deviation).toBeCloseTo(Math.sqrt(0.21 / 6), 12);
    expect(df).toBe(3);
    expect(() => withinSubjectDeviation([[1], [2]])).toThrow(/sets/);
  });

  it('is 1.96 √2 times the within-subject deviation', () => {
    // Bland & Altman 1996: peak flow, s_w 21.5 L/min, repeatability 60 L/min (2.77 s_w)
    expect(smallestDetectableChange(21.5, 1.96)).toBeCloseTo(59.6, 1);
    expect(smallestDetectableChange(0.1, 1.96, 4)).toBeCloseTo(smallestDetectableChange(0.1, 1.96) / 2, 12);
    expect(() => smallestDetectableChange(0.1, 1.96, 0)).toThrow(/replicates/);
  });
});
