import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { couplingCautions } from './coupling.ts';
import { equivalentRadiusChange } from './equivalent-radius-change.ts';
import { fiellerInterval } from './fieller-interval.ts';
import { geometricMeanRatio } from './geometric-mean-ratio.ts';
import { logarithmicMeanParts } from './logarithmic-mean-parts.ts';
import { pairedLogT } from './paired-log-t.ts';
import { sequentialParts } from './sequential-parts.ts';
import { shapleyParts } from './shapley-parts.ts';
import { sharesOfChange } from './shares.ts';
import { splitOfChange } from './split-of-change.ts';

const positive = fc.double({ min: 0.1, max: 100, noNaN: true });
const four = fc.tuple(positive, positive, positive, positive);
const close = (a: number, b: number, scale: number) => Math.abs(a - b) <= 1e-10 * scale;

describe('the split of a change', () => {
  it('adds up, turns its sign with time, and adds over consecutive steps', () => {
    fc.assert(
      fc.property(four, positive, positive, ([r1, r2, e1, e2], r3, e3) => {
        const forth = splitOfChange(r1, r2, e1, e2);
        const back = splitOfChange(r2, r1, e2, e1);
        const next = splitOfChange(r2, r3, e2, e3);
        const whole = splitOfChange(r1, r3, e1, e3);
        return (
          close(forth.rheological + forth.geometric, forth.total, 10) &&
          close(forth.geometric, 0 - back.geometric, 10) &&
          close(forth.geometric + next.geometric, whole.geometric, 10)
        );
      }),
    );
  });

  it('does not depend on units', () => {
    fc.assert(
      fc.property(four, positive, positive, ([r1, r2, e1, e2], kr, ke) =>
        close(
          splitOfChange(kr * r1, kr * r2, ke * e1, ke * e2).geometric,
          splitOfChange(r1, r2, e1, e2).geometric,
          10,
        ),
      ),
    );
  });

  it('in resistance units adds up to the change without residual', () => {
    fc.assert(
      fc.property(four, ([r1, r2, e1, e2]) => {
        const shapley = shapleyParts(r1, r2, e1, e2);
        const lmdi = logarithmicMeanParts(r1, r2, e1, e2);
        const sequential = sequentialParts(r1, r2, e1, e2);
        const scale = 1e6;
        return (
          close(shapley.rheological + shapley.vasomotor, r2 - r1, scale) &&
          close(lmdi.rheological + lmdi.vasomotor, r2 - r1, scale) &&
          close(sequential.rheologicalFirst + sequential.vasomotorAfter, r2 - r1, scale)
        );
      }),
    );
  });

  it('gives the worked example of section 6.2', () => {
    // R 37.2 → 26.5, η 3.6 → 3.1
    const shares = sharesOfChange(splitOfChange(37.2, 26.5, 3.6, 3.1));
    expect(shares.shown && shares.rheological).toBeCloseTo(0.441, 3);
    const lmdi = logarithmicMeanParts(37.2, 26.5, 3.6, 3.1);
    expect([lmdi.rheological, lmdi.vasomotor].map((part) => part.toFixed(2))).toEqual(['-4.72', '-5.98']);
    const sequential = sequentialParts(37.2, 26.5, 3.6, 3.1);
    expect(sequential.rheologicalFirst).toBeCloseTo(-5.17, 2);
    expect(sequential.vasomotorAfter).toBeCloseTo(-5.53, 2);
    expect(sequential.interaction).toBeCloseTo(0.89, 2);
  });

  it('keeps its digits where the resistances meet', () => {
    const { rheological, vasomotor } = logarithmicMeanParts(40, 40 * (1 + 1e-13), 3.9, 3.3);
    expect(rheological).toBeCloseTo(40 * Math.log(3.3 / 3.9), 9);
    expect(vasomotor).toBeCloseTo(-40 * Math.log(3.3 / 3.9), 9);
    expect(logarithmicMeanParts(40, 40, 3.9, 3.3).rheological).toBeCloseTo(40 * Math.log(3.3 / 3.9), 12);
  });

  it('gives the worked example of section 6.3, where everything cancels', () => {
    // R 40 → 41, η 3.9 → 3.3: B +0.0247, A −0.1671, G +0.1917; radius −4.7 %
    const parts = splitOfChange(40, 41, 3.9, 3.3);
    expect([parts.total, parts.rheological, parts.geometric].map((part) => part.toFixed(4))).toEqual([
      '0.0247',
      '-0.1671',
      '0.1917',
    ]);
    expect(equivalentRadiusChange(40, 41, 3.9, 3.3)).toBeCloseTo(-4.7, 1);
    expect(sharesOfChange(parts)).toMatchObject({ shown: false, reason: 'negligible-change' });
  });
});

describe('shares', () => {
  const parts = (total: number, rheological: number) =>
    splitOfChange(1, Math.exp(total), 1, Math.exp(rheological));
  const known = (standardErrorTotal: number, standardErrorRheological: number, tQuantile = 2) => ({
    standardErrorTotal,
    standardErrorRheological,
    tQuantile,
  });

  it('are refused up to a change of 5 %', () => {
    expect(sharesOfChange(parts(Math.log(1.0499), 0.02)).shown).toBe(false);
    expect(sharesOfChange(parts(Math.log(1.0501), 0.02)).shown).toBe(true);
    expect(sharesOfChange(parts(0, 0))).toMatchObject({ shown: false, reason: 'total-not-clear' });
  });

  it('are refused when the change is within t standard errors of none', () => {
    expect(sharesOfChange(parts(-0.3, -0.1), known(0.151, 0.02))).toMatchObject({
      reason: 'total-not-clear',
    });
    expect(sharesOfChange(parts(-0.3, -0.1), known(0.149, 0.02)).shown).toBe(true);
  });

  it('are refused only when the whole interval of a part opposes, not by the sign of a noisy part', () => {
    // G = −0.3 + 0.32 = +0.02: opposing in sign, but its interval (± 2 · 0.06) reaches the other side
    expect(sharesOfChange(parts(-0.3, -0.32), known(0.05, 0.03)).shown).toBe(true);
    // G = +0.2 with ± 0.12 lies wholly against
    expect(sharesOfChange(parts(-0.3, -0.5), known(0.05, 0.03))).toMatchObject({
      reason: 'geometric-opposes',
    });
    expect(sharesOfChange(parts(-0.3, 0.1), known(0.05, 0.03))).toMatchObject({
      reason: 'rheological-opposes',
    });
    expect(sharesOfChange(parts(0.3, -0.1), known(0.05, 0.03))).toMatchObject({
      reason: 'rheological-opposes',
    });
  });

  it('say in words why they are absent and are never clipped', () => {
    const refused = sharesOfChange(parts(-0.3, -0.5));
    expect(refused).toMatchObject({
      message:
        'opposing or negligible change: shares not meaningful (the hindrance moved against the resistance)',
    });
    const shown = sharesOfChange(parts(-0.3, -0.32), known(0.05, 0.03));
    expect(shown.shown && shown.rheological).toBeCloseTo(0.32 / 0.3, 12);
    expect(shown.shown && shown.rheological + shown.vasomotor).toBeCloseTo(1, 12);
  });
});

describe("Fieller's interval", () => {
  it('agrees with its definition at both ends', () => {
    const interval = fiellerInterval(-0.15, -0.34, { numerator: 0.02 ** 2, denominator: 0.08 ** 2 }, 1.96);
    if (!interval.bounded) throw new Error('unbounded');
    for (const s of [interval.lower, interval.upper]) {
      expect((-0.15 + 0.34 * s) ** 2).toBeCloseTo(1.96 ** 2 * (0.02 ** 2 + s ** 2 * 0.08 ** 2), 12);
    }
    expect(interval.lower).toBeLessThan(0.15 / 0.34);
    expect(interval.upper).toBeGreaterThan(0.15 / 0.34);
  });

  it('is not estimable where the denominator is not clear of 0', () => {
    expect(fiellerInterval(-0.05, -0.1, { numerator: 0.02 ** 2, denominator: 0.08 ** 2 }, 1.96)).toEqual({
      bounded: false,
    });
  });

  it('covers the true share in 95 of 100 samples', () => {
    // haemodynamics reference 6.4: 95.1 % at B −0.34 and 95.0 % at −0.20 with SEs 0.02 and 0.08
    const normal = seededNormal(20260101);
    const z = 1.959963984540054;
    for (const [a, b] of [
      [-0.15, -0.34],
      [-0.09, -0.2],
    ] as const) {
      let covered = 0;
      for (let i = 0; i < 20_000; i++) {
        const sampleA = a + 0.02 * normal();
        const sampleB = b + 0.08 * normal();
        const variances = { numerator: 0.02 ** 2, denominator: 0.08 ** 2 };
        const interval = fiellerInterval(sampleA, sampleB, variances, z);
        const share = a / b;
        // An unbounded set is no interval; whether it holds the share is asked of its definition.
        const holds = interval.bounded
          ? interval.lower <= share && share <= interval.upper
          : (sampleA - share * sampleB) ** 2 <=
            z ** 2 * (variances.numerator + share ** 2 * variances.denominator);
        if (holds) covered++;
      }
      expect(covered / 20_000).toBeGreaterThan(0.944);
      expect(covered / 20_000).toBeLessThan(0.956);
    }
  });

  it('refuses a covariance that no variances allow', () => {
    expect(() => fiellerInterval(1, 2, { numerator: 1, denominator: 1, covariance: 1.1 }, 2)).toThrow(
      /covariance/,
    );
  });
});

describe('paired log-changes', () => {
  it('have a geometric mean ratio that inverts with the pairs', () => {
    const before = [10.4, 9.1, 12.2];
    const after = [9.0, 8.8, 10.1];
    expect(geometricMeanRatio(before, after) * geometricMeanRatio(after, before)).toBeCloseTo(1, 14);
    expect(pairedLogT(before, after)).toBeCloseTo(0 - pairedLogT(after, before), 12);
  });

  it('name an unpaired or unusable value', () => {
    expect(() => geometricMeanRatio([1, 2], [1])).toThrow(/after/);
    expect(() => geometricMeanRatio([1, 2], [1, 0])).toThrow(/after\[2\]/);
    expect(() => pairedLogT([1, 2, 4], [2, 4, 8])).toThrow(/different ratios/);
  });
});

describe('coupling', () => {
  it('warns where two quantities share a measured term', () => {
    expect(couplingCautions('hindrance', 'resistance').map(({ code }) => code)).toEqual([
      'MATHEMATICAL_COUPLING',
    ]);
    expect(couplingCautions('hindrance', 'haematocrit')).toHaveLength(1);
    expect(couplingCautions('resistance', 'haematocrit')).toHaveLength(0);
  });
});

function seededNormal(seed: number): () => number {
  let state = seed;
  const uniform = () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  return () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
}
