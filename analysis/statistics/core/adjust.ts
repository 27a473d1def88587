/** Ways to correct p-values for their number that a plan may ask for. */
export type Adjustment = 'holm' | 'bonferroni' | 'benjamini_hochberg' | 'none';

/**
 * p-values corrected for their number; null (no test) stays null and does not count.
 *
 * Source   Holm 1979, Scand J Stat 6:65-70; Benjamini & Hochberg 1995, JRSS B 57:289-300
 */
export function adjustPValues(
  pValues: readonly (number | null)[],
  adjustment: Adjustment,
): (number | null)[] {
  const tests = pValues.flatMap((p, index) => (p === null || Number.isNaN(p) ? [] : [{ p, index }]));
  const adjusted = rules[adjustment](tests.map((test) => test.p));
  const result: (number | null)[] = pValues.map(() => null);
  tests.forEach((test, i) => (result[test.index] = adjusted[i]!));
  return result;
}

export function bonferroni(p: readonly number[]): number[] {
  return p.map((value) => Math.min(1, value * p.length));
}

export function holm(p: readonly number[]): number[] {
  return stepwise(p, 'smallest-first', (rank) => p.length - rank);
}

/** Hochberg 1988, Biometrika 75:800-802. */
export function hochberg(p: readonly number[]): number[] {
  return stepwise(p, 'largest-first', (rank) => p.length - rank);
}

export function benjaminiHochberg(p: readonly number[]): number[] {
  return stepwise(p, 'largest-first', (rank) => p.length / (rank + 1));
}

/** Benjamini & Yekutieli 2001, Ann Stat 29:1165-1188. */
export function benjaminiYekutieli(p: readonly number[]): number[] {
  let harmonic = 0;
  for (let i = 1; i <= p.length; i += 1) harmonic += 1 / i;
  return stepwise(p, 'largest-first', (rank) => (harmonic * p.length) / (rank + 1));
}

const rules: Record<Adjustment, (p: readonly number[]) => number[]> = {
  holm,
  bonferroni,
  benjamini_hochberg: benjaminiHochberg,
  none: (p) => [...p],
};

/** Multiplies by a factor of the rank (0 for the smallest) and makes the result monotone, at most 1. */
function stepwise(
  p: readonly number[],
  direction: 'smallest-first' | 'largest-first',
  factor: (rank: number) => number,
): number[] {
  const order = p.map((_, index) => index).sort((a, b) => p[a]! - p[b]!);
  const ranks = order.map((_, rank) => rank);
  const up = direction === 'smallest-first';
  if (!up) ranks.reverse();
  const result = new Array<number>(p.length);
  let reached = up ? 0 : 1;
  for (const rank of ranks) {
    const scaled = p[order[rank]!]! * factor(rank);
    reached = up ? Math.max(reached, scaled) : Math.min(reached, scaled);
    result[order[rank]!] = Math.min(1, reached);
  }
  return result;
}
