import { describe, expect, it } from 'vitest';
import {
  adjustPValues,
  benjaminiHochberg,
  benjaminiYekutieli,
  bonferroni,
  hochberg,
  holm,
} from './adjust.ts';

// Fifteen p-values of Benjamini & Hochberg 1995, JRSS B 57:289-300, section 4.1.
const published = [
  0.0001, 0.0004, 0.0019, 0.0095, 0.0201, 0.0278, 0.0298, 0.0344, 0.0459, 0.324, 0.4262, 0.5719, 0.6528,
  0.759, 1,
];

const rejected = (adjusted: number[]) => adjusted.filter((p) => p <= 0.05).length;

describe('adjusted p-values', () => {
  it('reject as many hypotheses as the paper says: Bonferroni 3, Hochberg 3, Benjamini and Hochberg 4', () => {
    expect(rejected(bonferroni(published))).toBe(3);
    expect(rejected(hochberg(published))).toBe(3);
    expect(rejected(benjaminiHochberg(published))).toBe(4);
    expect(rejected(holm(published))).toBe(3);
  });

  it('follow the definitions by hand, in any order', () => {
    const p = [0.03, 0.01, 0.04];
    expect(holm(p)).toEqual([0.06, 0.03, 0.06]); // 3·0.01, 2·0.03, max(0.06, 0.04)
    expect(hochberg(p)).toEqual([0.04, 0.03, 0.04]); // 0.04, min(0.04, 0.06), 0.03
    expect(benjaminiHochberg(p).map((q) => Math.round(q * 1e12) / 1e12)).toEqual([0.04, 0.03, 0.04]);
    expect(benjaminiYekutieli([0.01, 0.5])).toEqual([0.03, 0.75]); // factor 1 + ½
  });

  it('leave a missing test out of the count and keep its place', () => {
    expect(adjustPValues([0.02, null, 0.5], 'bonferroni')).toEqual([0.04, null, 1]);
    expect(adjustPValues([null], 'holm')).toEqual([null]);
    expect(adjustPValues([0.02, 0.7], 'none')).toEqual([0.02, 0.7]);
  });
});
