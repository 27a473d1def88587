import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { quantity } from '../../units/quantity.ts';
import { forearmVascularConductance } from './forearm-vascular-conductance.ts';
import { forearmVascularResistanceVariation } from './forearm-vascular-resistance-variation.ts';
import { forearmVascularResistance } from './forearm-vascular-resistance.ts';
import { resistanceInParallel } from './resistance-in-parallel.ts';
import { resistanceInSeries } from './resistance-in-series.ts';
import { resistanceStandardDeviation } from './resistance-standard-deviation.ts';
import { transpulmonaryGradient } from './transpulmonary-gradient.ts';

const positive = fc.double({ min: 1e-2, max: 1e3, noNaN: true });

describe('resistance', () => {
  it('is the inverse of conductance', () => {
    fc.assert(
      fc.property(positive, positive, (map, fbf) => {
        const pressure = quantity<'mm[Hg]'>(map);
        const flow = quantity<'mL/min/dL'>(fbf);
        return (
          Math.abs(
            forearmVascularResistance(pressure, flow) * forearmVascularConductance(pressure, flow) - 1,
          ) < 1e-14
        );
      }),
    );
  });

  it('in parallel lies below the smallest and in series above the largest', () => {
    fc.assert(
      fc.property(fc.array(positive, { minLength: 2, maxLength: 20 }), (values) => {
        const beds = values.map((value) => quantity<"[wood'U]">(value));
        return (
          resistanceInParallel(beds) < Math.min(...values) && resistanceInSeries(beds) > Math.max(...values)
        );
      }),
    );
  });

  it('in parallel does not depend on the order of beds', () => {
    const beds = [2, 3, 6].map((value) => quantity<"[wood'U]">(value));
    expect(resistanceInParallel([...beds].reverse())).toBeCloseTo(resistanceInParallel(beds), 15);
    expect(() => resistanceInParallel([...beds, quantity<"[wood'U]">(0)])).toThrow(/resistances\[4\]/);
    expect(() => resistanceInSeries([])).toThrow(/resistances/);
  });

  it('has a deviation that explodes as the gradient shrinks', () => {
    // haemodynamics reference, section 3: SDs of 1.5 and 1.2 on a gradient of 9 mmHg already give 21 %
    const relative = resistanceStandardDeviation(9, 1.5, 1.2, 5, 0) / (9 / 5);
    expect(relative).toBeCloseTo(0.21, 2);
  });

  it('varies less when pressure and flow share their noise', () => {
    const variation = (correlation: number) =>
      forearmVascularResistanceVariation(
        quantity(90),
        quantity(9),
        quantity(2.5),
        quantity(0.25),
        quantity(correlation),
      );
    expect(variation(1)).toBeCloseTo(0, 12);
    expect(variation(0)).toBeCloseTo(Math.SQRT2 * 0.1, 12);
    expect(() => variation(1.01)).toThrow(/correlation/);
  });

  it('keeps a negative gradient readable but not divisible', () => {
    expect(transpulmonaryGradient(quantity(10), quantity(12))).toBe(-2);
    expect(() => transpulmonaryGradient(quantity(NaN), quantity(12))).toThrow(
      /meanPulmonaryArterialPressure/,
    );
  });
});
