import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { quantity } from '../../units/quantity.ts';
import { forearmBloodFlowFromPercentSlope } from './forearm-blood-flow-from-percent-slope.ts';
import { gaugeVolumeChangeExact } from './gauge-volume-change-exact.ts';
import { gaugeVolumeChange } from './gauge-volume-change.ts';
import { leastSquaresLine } from './least-squares-line.ts';

describe('least-squares line', () => {
  it('finds slope, intercept and standard error of a worked example', () => {
    // Hand algebra: t 0..4, v = 1, 3, 2, 5, 4: Stt 10, Stv 8, slope 0.8, RSS 3.6, SE √(1.2/10)
    const { slope, intercept, standardError, rSquared } = leastSquaresLine([0, 1, 2, 3, 4], [1, 3, 2, 5, 4]);
    expect(slope).toBeCloseTo(0.8, 14);
    expect(intercept).toBeCloseTo(1.4, 14);
    expect(standardError).toBeCloseTo(Math.sqrt(0.12), 14);
    expect(rSquared).toBeCloseTo(0.64, 14);
  });

  it('finds an exact line wherever it lies', () => {
    const number = fc.double({ min: -1e3, max: 1e3, noNaN: true });
    fc.assert(
      fc.property(number, number, number, (slope, level, start) => {
        const times = [0, 1, 2.5, 4, 7].map((t) => t + start);
        const fitted = leastSquaresLine(
          times,
          times.map((t) => level + slope * (t - start)),
        );
        return Math.abs(fitted.slope - slope) <= 1e-10 * (1 + Math.abs(slope) + Math.abs(level));
      }),
    );
  });

  it('has no standard error from two points and no line from one', () => {
    expect(leastSquaresLine([0, 1], [1, 2]).standardError).toBeUndefined();
    expect(() => leastSquaresLine([0], [1], 'volume')).toThrow(/volume/);
    expect(() => leastSquaresLine([0, 1, 1], [1, 2, 3])).toThrow(/t\[3\]/);
  });
});

describe('forearm blood flow', () => {
  it('stops above 100 unless hyperaemia is confirmed', () => {
    expect(forearmBloodFlowFromPercentSlope(quantity(100 / 60))).toBeCloseTo(100, 10);
    expect(() => forearmBloodFlowFromPercentSlope(quantity(1.7))).toThrow(/hyperaemia/);
    expect(forearmBloodFlowFromPercentSlope(quantity(1.7), { confirmedHyperaemia: true })).toBeCloseTo(
      102,
      10,
    );
  });
});

describe('gauge', () => {
  it.each([
    // haemodynamics reference 1.1: the small-strain form is low by 0.25 % and 1.85 % of itself
    [0.005, 0.0025],
    [0.037, 0.0185],
  ])('differs from the exact form at a strain of %d', (strain, relative) => {
    const small = gaugeVolumeChange(quantity(250 * strain), quantity(250));
    expect(gaugeVolumeChangeExact(quantity(250 * strain), quantity(250)) / small - 1).toBeCloseTo(
      relative,
      6,
    );
  });

  it('cannot lengthen by its whole length', () => {
    expect(() => gaugeVolumeChange(quantity(250), quantity(250))).toThrow(/lengthening/);
    expect(() => gaugeVolumeChangeExact(quantity(1), quantity(0))).toThrow(/circumference/);
  });
});
