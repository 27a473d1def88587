import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { quantity } from '../../units/quantity.ts';
import { formFactorFromHeartRate } from './form-factor-from-heart-rate.ts';
import { formFactorFromMeanPressure } from './form-factor-from-mean-pressure.ts';
import { hydrostaticPressure } from './hydrostatic-pressure.ts';
import { meanArterialPressureFormFactor } from './mean-arterial-pressure-form-factor.ts';
import { meanArterialPressureHeartRate } from './mean-arterial-pressure-heart-rate.ts';
import { meanArterialPressureOneThird } from './mean-arterial-pressure-one-third.ts';
import { meanPressureFromWaveform } from './mean-pressure-from-waveform.ts';
import { pulsePressure } from './pulse-pressure.ts';

const cuff = fc
  .tuple(fc.double({ min: 20, max: 150, noNaN: true }), fc.double({ min: 5, max: 150, noNaN: true }))
  .map(([diastolic, pulse]) => ({
    systolic: quantity<'mm[Hg]'>(diastolic + pulse),
    diastolic: quantity<'mm[Hg]'>(diastolic),
  }));

describe('mean arterial pressure', () => {
  it('lies between diastolic and systolic by every rule', () => {
    fc.assert(
      fc.property(cuff, ({ systolic, diastolic }) =>
        [
          meanArterialPressureOneThird(systolic, diastolic),
          meanArterialPressureFormFactor(systolic, diastolic, quantity(0.412)),
          meanArterialPressureHeartRate(systolic, diastolic, quantity(70)),
        ].every((mean) => mean > diastolic && mean < systolic),
      ),
    );
  });

  it('gives back the form factor it was made with', () => {
    fc.assert(
      fc.property(cuff, fc.double({ min: 0.2, max: 0.6, noNaN: true }), ({ systolic, diastolic }, k) => {
        const mean = meanArterialPressureFormFactor(systolic, diastolic, quantity(k));
        return Math.abs(formFactorFromMeanPressure(systolic, diastolic, mean) - k) < 1e-12 * 300;
      }),
    );
  });

  it('of 130/90 is 103.3 by one third, not 70', () => {
    expect(meanArterialPressureOneThird(quantity(130), quantity(90))).toBeCloseTo(103.33, 2);
  });

  it('is the mean of means for a linear rule', () => {
    const one = meanArterialPressureOneThird(quantity(120), quantity(80));
    const other = meanArterialPressureOneThird(quantity(128), quantity(84));
    expect(meanArterialPressureOneThird(quantity(124), quantity(82))).toBeCloseTo((one + other) / 2, 12);
  });

  it.each([0.19, 0.61, NaN])('refuses a form factor of %d', (k) => {
    expect(() => meanArterialPressureFormFactor(quantity(120), quantity(80), quantity(k))).toThrow(
      /formFactor/,
    );
  });

  it('refuses a logarithm of heart rate at 45 and takes one above', () => {
    expect(() => formFactorFromHeartRate(quantity(45))).toThrow(/heartRate/);
    expect(formFactorFromHeartRate(quantity(45.1))).toBeGreaterThan(0);
  });

  it('of a waveform does not depend on where the clock starts', () => {
    const times = [0, 0.1, 0.2, 0.3, 0.4].map((t) => quantity<'s'>(t));
    const pressures = [80, 110, 120, 100, 80].map((p) => quantity<'mm[Hg]'>(p));
    const later = times.map((t) => quantity<'s'>(t + 1000));
    expect(meanPressureFromWaveform(later, pressures)).toBeCloseTo(
      meanPressureFromWaveform(times, pressures),
      9,
    );
    expect(() => meanPressureFromWaveform(times.slice(1), pressures)).toThrow(/pressures/);
    expect(() => meanPressureFromWaveform([...times].reverse(), pressures)).toThrow(/t\[2\]/);
  });
});

describe('pulse pressure', () => {
  it('refuses exchanged pressures', () => {
    expect(() => pulsePressure(quantity(80), quantity(120))).toThrow(/systolicPressure/);
    expect(() => pulsePressure(quantity(80), quantity(-1))).toThrow(/diastolicPressure/);
  });
});

describe('hydrostatic pressure', () => {
  it('changes sign with the side of the heart', () => {
    expect(hydrostaticPressure(quantity(-0.3))).toBe(0 - hydrostaticPressure(quantity(0.3)));
  });

  it('reaches 0.6 m, or further on a standing leg', () => {
    expect(hydrostaticPressure(quantity(0.6))).toBeGreaterThan(0);
    expect(() => hydrostaticPressure(quantity(0.61))).toThrow(/height/);
    expect(hydrostaticPressure(quantity(1.2), undefined, undefined, true)).toBeGreaterThan(0);
  });
});
