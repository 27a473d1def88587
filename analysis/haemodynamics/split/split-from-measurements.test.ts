import { describe, expect, it } from 'vitest';
import reference from '../../reference/haemodynamics/split-over-laws.json' with { type: 'json' };
import { quantity } from '../../units/quantity.ts';
import { viscosityLawNamed } from '../../haemorheology/viscosity-laws.ts';
import { effectiveDegreesOfFreedom, measurementOfKnownSpread, measurementOfReadings } from './measurement.ts';
import type { SplitCondition } from './split-from-measurements.ts';
import { splitFromMeasurements, splitOverLaws } from './split-from-measurements.ts';

const exact = (value: number) => measurementOfKnownSpread('value', value, 0);
const condition = (
  { meanPressure, flow, haematocrit }: { meanPressure: number; flow: number; haematocrit: number },
  plasma = 1.2,
): SplitCondition => ({
  meanPressure: exact(meanPressure),
  flow: exact(flow),
  haematocrit: exact(haematocrit),
  plasmaViscosity: { ...exact(plasma), temperature: quantity(37) },
});
const normal = { tQuantile: () => 1.959963984540054 };
const before = condition(reference.before);
const after = condition(reference.after);

describe('the split over laws', () => {
  it.each(reference.rows)('$law $options: $share_percent % and radius $radius_percent %', (row) => {
    const split = splitFromMeasurements(before, after, { law: row.law, options: row.options }, normal);
    expect(split.total.estimate).toBeCloseTo(reference.total, 4);
    if (!split.shares.shown) throw new Error(split.shares.message);
    expect(Math.abs(100 * split.shares.rheological - row.share_percent)).toBeLessThan(0.75);
    expect(Math.abs(split.equivalentRadiusChangePercent - row.radius_percent)).toBeLessThan(0.06);
  });

  it.each(reference.sensitivity_per_point_at_40)(
    '$law $options rises by $percent % a point at 40 %',
    (row) => {
      const law = viscosityLawNamed(row.law);
      const at = (h: number) => law.viscosity(quantity(h), quantity(1.2), row.options).viscosity;
      expect(Math.abs((100 * (at(0.405) - at(0.395))) / at(0.4) - row.percent)).toBeLessThan(0.06);
    },
  );

  it.each(reference.haemodilution_60_to_50)('$law $options falls by $log_change from 60 to 50 %', (row) => {
    const law = viscosityLawNamed(row.law);
    const at = (h: number) => law.viscosity(quantity(h), quantity(1.2), row.options).viscosity;
    expect(Math.abs(Math.log(at(0.5) / at(0.6)) - row.log_change)).toBeLessThan(0.006);
  });

  it('shows the three default laws', () => {
    expect(splitOverLaws(before, after, normal).map(({ law }) => law)).toEqual([
      { id: 'pries-bulk', version: 1, options: {} },
      { id: 'quemada-cokelet', version: 1, options: { shearRate: 200 } },
      { id: 'pries-in-vitro', version: 1, options: { diameter: 100 } },
    ]);
  });

  it('credits a fall of plasma viscosity to rheology, and brings it to 37 Cel', () => {
    const held = splitFromMeasurements(before, after, { law: 'pries-bulk' }, normal);
    const fallen = splitFromMeasurements(
      before,
      condition(reference.after, 1.15),
      { law: 'pries-bulk' },
      normal,
    );
    expect(fallen.rheological.estimate - held.rheological.estimate).toBeCloseTo(Math.log(1.15 / 1.2), 12);
    const cool = { ...after, plasmaViscosity: { ...exact(1.6), temperature: quantity<'Cel'>(25) } };
    // Water falls by the factor 0.7753 from 25 to 37 Cel: 1.6 becomes 1.2406 (reference case hd-086)
    expect(
      splitFromMeasurements(before, cool, { law: 'pries-bulk' }, normal).rheological.estimate,
    ).toBeCloseTo(held.rheological.estimate + Math.log(1.240552412 / 1.2), 8);
  });
});

describe('uncertainty', () => {
  const noisy = (readings: {
    pressure: number[];
    flow: number[];
    haematocrit: number[];
  }): SplitCondition => ({
    meanPressure: measurementOfReadings('pressure', readings.pressure),
    flow: measurementOfReadings('flow', readings.flow),
    haematocrit: measurementOfReadings('haematocrit', readings.haematocrit),
    plasmaViscosity: { ...exact(1.2), temperature: quantity(37) },
  });
  const one = noisy({ pressure: [92, 94], flow: [2.4, 2.5, 2.6], haematocrit: [0.42, 0.424] });
  const two = noisy({ pressure: [89, 91], flow: [3.2, 3.4, 3.6], haematocrit: [0.36, 0.362] });

  it('is propagated from replicate readings', () => {
    const split = splitFromMeasurements(one, two, { law: 'lichtman' }, { tQuantile: () => 2.5 });
    // Hand algebra: relative variances of the four means; d ln η/dH = 1.138 ln 10 for this law
    const pressure = (2 / 93 ** 2 + 2 / 90 ** 2) / 2;
    const flow = (0.01 / 2.5 ** 2 + 0.04 / 3.4 ** 2) / 3;
    const haematocrit = (1.138 * Math.LN10) ** 2 * ((8e-6 + 2e-6) / 2);
    expect(split.total.standardError).toBeCloseTo(Math.sqrt(pressure + flow), 10);
    expect(split.rheological.standardError).toBeCloseTo(Math.sqrt(haematocrit), 6);
    expect(split.geometric.standardError).toBeCloseTo(Math.sqrt(pressure + flow + haematocrit), 6);
    expect(split.total.upper - split.total.estimate).toBeCloseTo(2.5 * split.total.standardError, 12);
  });

  it('grows by the variance of the law', () => {
    const plain = splitFromMeasurements(one, two, { law: 'pries-bulk' }, normal);
    const wider = splitFromMeasurements(one, two, { law: 'pries-bulk' }, { ...normal, modelVariance: 0.01 });
    expect(wider.geometric.standardError ** 2 - plain.geometric.standardError ** 2).toBeCloseTo(0.01, 12);
    expect(wider.total.standardError).toBe(plain.total.standardError);
  });

  it('has degrees of freedom between the smallest and the sum', () => {
    expect(
      effectiveDegreesOfFreedom([
        { variance: 1, df: 4 },
        { variance: 1, df: 4 },
      ]),
    ).toBe(8);
    expect(
      effectiveDegreesOfFreedom([
        { variance: 1, df: 4 },
        { variance: 0, df: 9 },
      ]),
    ).toBe(4);
    expect(effectiveDegreesOfFreedom([{ variance: 0, df: 4 }])).toBe(Infinity);
  });

  it('works at the edge of a law', () => {
    const edge = { ...two, haematocrit: measurementOfKnownSpread('haematocrit', 0.3, 0.004) };
    const split = splitFromMeasurements(one, edge, { law: 'walburn-schneck' }, normal);
    expect(split.rheological.standardError).toBeGreaterThan(0);
    expect(split.cautions.map(({ code }) => code)).toContain('HAEMATOCRIT_RANGE');
  });

  it('needs two readings, or a known spread', () => {
    expect(() => measurementOfReadings('flow', [2.4])).toThrow(/flow/);
    expect(() => measurementOfReadings('flow', [2.4, -1])).toThrow(/flow\[2\]/);
    expect(measurementOfKnownSpread('flow', 2, 0.2, { replicates: 4, df: 20 })).toEqual({
      estimate: 2,
      relativeVariance: 0.0025000000000000005,
      df: 20,
    });
  });
});
