import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DomainError } from '../../units/errors.ts';
import type { Signal } from '../signal.ts';
import { sampled, seededNormal } from '../synthetic.test-support.ts';
import { cardiacPeriod } from './cardiac-period.ts';
import { plethysmographReadings } from './plethysmograph.ts';

interface Trace {
  slope?: number;
  pulse?: number;
  artefact?: number;
  drift?: number;
  noise?: number;
  rate?: number;
  scale?: number;
}

const onsets = [5, 20, 35, 50];

/** Four cycles of 10 s inflated and 5 s free from 5 s on: linear filling, fast emptying, a cuff artefact of 0.6 s. */
function volumeTrace({
  slope = 0.05,
  pulse = 0.01,
  artefact = 0.15,
  drift = 0,
  noise = 0,
  rate = 100,
  scale = 1,
}: Trace = {}): Signal {
  const normal = seededNormal(3);
  return sampled(68, rate, '%', (time) => {
    const inCycle = (time - 5) % 15;
    const started = time >= 5 && time < 65;
    const filled = !started
      ? 0
      : inCycle < 10
        ? slope * inCycle
        : 10 * slope * Math.exp(-(inCycle - 10) / 0.7);
    const jolt = started && inCycle < 0.6 ? artefact * Math.sin((Math.PI * inCycle) / 0.6) : 0;
    const beat = pulse * Math.sin(2 * Math.PI * 1.1 * time);
    return scale * (filled + jolt + beat + drift * time + noise * normal());
  });
}

const cuff = (rate = 100) =>
  sampled(68, rate, 'mm[Hg]', (time) => {
    const inCycle = (time - 5) % 15;
    return time >= 5 && time < 65 && inCycle < 10 ? Math.min(50, 160 * inCycle) : 0;
  });

describe('plethysmograph readings', () => {
  it.each([
    ['from the cuff channel', { cuff: cuff() }],
    ['from the volume alone', {}],
  ])('find each filling phase and its flow %s', (_, options) => {
    const readings = plethysmographReadings(volumeTrace(), options);
    expect(readings).toHaveLength(4);
    readings.forEach(({ phase, window, flow, usable, cautions }, index) => {
      expect(Math.abs(phase.onset - onsets[index]!)).toBeLessThan(0.7);
      expect(window.start).toBeGreaterThanOrEqual(onsets[index]! + 0.6);
      // Three beats at 66 a minute
      expect(Math.abs(window.end - window.start - 3 / 1.1)).toBeLessThan(0.1);
      expect(Math.abs(flow! - 3)).toBeLessThan(0.12);
      expect(usable).toBe(true);
      expect(cautions).toEqual([]);
    });
  });

  it('find the slope whatever it is', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.02, max: 0.6, noNaN: true }), (slope) => {
        const readings = plethysmographReadings(volumeTrace({ slope, pulse: 0.01, noise: 0.001 }), {
          cuff: cuff(),
        });
        return (
          readings.length === 4 && readings.every((reading) => Math.abs(reading.slope / slope - 1) < 0.1)
        );
      }),
      { numRuns: 25 },
    );
  });

  it('leave the cuff artefact out', () => {
    const flow = (artefact: number) =>
      plethysmographReadings(volumeTrace({ artefact }), { cuff: cuff() })[0]!.flow!;
    expect(flow(0.5)).toBeCloseTo(flow(0), 10);
    const touched = plethysmographReadings(volumeTrace({ artefact: 0.5 }), { cuff: cuff(), skip: 0 })[0]!
      .flow!;
    expect(Math.abs(touched - 3)).toBeGreaterThan(0.3);
  });

  it('say that the window is fixed where no pulse is clear', () => {
    const [reading] = plethysmographReadings(volumeTrace({ pulse: 0, noise: 0.001 }), {
      cuff: cuff(),
      fixedWindow: 4,
    });
    expect(reading!.cautions.map(({ code }) => code)).toEqual(['FIXED_WINDOW']);
    expect(reading!.window.end - reading!.window.start).toBeCloseTo(4, 6);
    expect(Math.abs(reading!.slope - 0.05)).toBeLessThan(4 * reading!.standardError);
    // SE of a slope over 4 s at 100 Hz with independent noise σ: σ / √(n³ step²/12)
    expect(reading!.standardError / (0.001 / Math.sqrt((401 ** 3 * 0.01 ** 2) / 12))).toBeCloseTo(1, 0);
  });

  it('with a drifting baseline and a poor line are unusable until someone has looked', () => {
    const drifting = plethysmographReadings(volumeTrace({ drift: 0.02, pulse: 0 }), { cuff: cuff() });
    expect(drifting[0]!.cautions.map(({ code }) => code)).toContain('BASELINE_DRIFT');
    expect(drifting[0]!.usable).toBe(true);
    const noisy = plethysmographReadings(volumeTrace({ drift: 0.02, noise: 0.2, pulse: 0 }), {
      cuff: cuff(),
    });
    expect(noisy[0]!.cautions.map(({ code }) => code)).toEqual(
      expect.arrayContaining(['BASELINE_DRIFT', 'SLOPE_FIT']),
    );
    expect(noisy[0]!.usable).toBe(false);
  });

  it('give no flow where the volume falls', () => {
    const [reading] = plethysmographReadings(volumeTrace({ slope: -0.05 }), { cuff: cuff() });
    expect(reading!.flow).toBeUndefined();
    expect(reading!.usable).toBe(false);
  });

  it('need a calibration for a signal in millivolt, and scale by it', () => {
    const millivolt = { ...volumeTrace({ scale: 20 }), unit: 'mV' };
    expect(() => plethysmographReadings(millivolt)).toThrow(
      expect.objectContaining({ code: 'calibration_missing' }) as Error,
    );
    const calibrated = plethysmographReadings(millivolt, {
      cuff: cuff(),
      calibration: { deflection: 20, percent: 1 },
    });
    expect(calibrated[0]!.flow).toBeCloseTo(
      plethysmographReadings(volumeTrace(), { cuff: cuff() })[0]!.flow!,
      10,
    );
    const upsideDown = plethysmographReadings(
      { ...volumeTrace({ scale: -20 }), unit: 'mV' },
      { cuff: cuff(), calibration: { deflection: -20, percent: 1 } },
    );
    expect(upsideDown[0]!.flow).toBeCloseTo(calibrated[0]!.flow!, 10);
  });

  it('do not depend on when the clock starts', () => {
    const shift = (signal: Signal): Signal => ({ ...signal, times: signal.times.map((time) => time + 5000) });
    const late = plethysmographReadings(shift(volumeTrace()));
    expect(late.map(({ phase }) => Math.round(phase.onset - 5000))).toEqual(
      plethysmographReadings(volumeTrace()).map(({ phase }) => Math.round(phase.onset)),
    );
  });

  it('take no arbitrary units for percent', () => {
    const arbitrary = { ...volumeTrace(), unit: '1' };
    expect(() => plethysmographReadings(arbitrary)).toThrow(
      expect.objectContaining({ code: 'calibration_missing' }) as Error,
    );
    expect(plethysmographReadings({ ...volumeTrace(), unit: 'mL/dL' }, { cuff: cuff() })).toHaveLength(4);
  });

  it('above 100 mL/min/dL wait for a person to confirm hyperaemia', () => {
    const [high] = plethysmographReadings(volumeTrace({ slope: 1.7 }), { cuff: cuff() });
    expect(high!.cautions.map(({ code }) => code)).toContain('FLOW_UNCONFIRMED');
    expect(high!.usable).toBe(false);
  });

  it('are absent from a flat or too slow record', () => {
    expect(() => plethysmographReadings(sampled(60, 100, '%', () => 0))).toThrow(
      expect.objectContaining({ code: 'no_filling_phase' }) as Error,
    );
    expect(() => plethysmographReadings(volumeTrace({ rate: 10 }))).toThrow(
      expect.objectContaining({ code: 'sampling_too_slow' }) as Error,
    );
    expect(() => plethysmographReadings(volumeTrace(), { cycles: 0 })).toThrow(DomainError);
    expect(() => plethysmographReadings(volumeTrace(), { skip: 6 })).toThrow(DomainError);
  });

  it('beside a gap lose only the phase that the gap cuts', () => {
    const whole = volumeTrace();
    const keep = (_: number, index: number) => whole.times[index]! < 22 || whole.times[index]! > 23;
    const torn = { ...whole, times: whole.times.filter(keep), values: whole.values.filter(keep) };
    expect(
      plethysmographReadings(torn, { cuff: cuff() }).map(({ phase }) => Math.round(phase.onset)),
    ).toEqual([5, 35, 50]);
  });
});

describe('cardiac period', () => {
  it.each([45, 66, 100, 150])('of %d beats a minute is found on a filling limb', (heartRate) => {
    const values = Float64Array.from(
      { length: 900 },
      (_, i) => 0.0005 * i + 0.02 * Math.sin((2 * Math.PI * heartRate * i) / 6000),
    );
    expect(60 / cardiacPeriod(values, 0.01)!).toBeCloseTo(heartRate, -0.5);
  });

  it('is not invented from noise', () => {
    const normal = seededNormal(5);
    expect(cardiacPeriod(Float64Array.from({ length: 900 }, normal), 0.01)).toBeUndefined();
    expect(cardiacPeriod(new Float64Array(100), 0.01)).toBeUndefined();
  });
});
