import { DomainError } from '../units/errors.ts';

const cumulative = new Map<number, Float64Array>();

/**
 * P(V ≤ v) of Wilcoxon's signed-rank statistic for n untied non-zero differences, exactly.
 *
 * Formula  number of subsets of {1 … n} with sum at most v, by convolution, over 2ⁿ
 * Domain   n an integer from 1 to 50 (all counts are exact in doubles); v any integer
 * Errors   DomainError naming n
 * Source   Hollander & Wolfe 1973, section 3.1 and table A.4
 */
export function signedRankCdf(v: number, n: number): number {
  const table = cumulativeCounts(n);
  if (v < 0) return 0;
  return v >= table.length - 1 ? 1 : table[v]! / 2 ** n;
}

/** P(V ≥ v); the distribution is symmetric about n(n + 1)/4. */
export function signedRankUpperTail(v: number, n: number): number {
  return signedRankCdf((n * (n + 1)) / 2 - v, n);
}

/** Smallest v with P(V ≤ v) ≥ p. */
export function signedRankQuantile(p: number, n: number): number {
  const table = cumulativeCounts(n);
  const wanted = p * 2 ** n;
  let low = 0;
  let high = table.length - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (table[middle]! >= wanted) high = middle;
    else low = middle + 1;
  }
  return low;
}

function cumulativeCounts(n: number): Float64Array {
  const known = cumulative.get(n);
  if (known) return known;
  if (!Number.isInteger(n) || n < 1 || n > 50) throw new DomainError('n', 'an integer from 1 to 50', n);
  const counts = new Float64Array((n * (n + 1)) / 2 + 1);
  counts[0] = 1;
  for (let rank = 1, top = 0; rank <= n; rank += 1) {
    top += rank;
    for (let sum = top; sum >= rank; sum -= 1) counts[sum]! += counts[sum - rank]!;
  }
  for (let sum = 1; sum < counts.length; sum += 1) counts[sum]! += counts[sum - 1]!;
  cumulative.set(n, counts);
  return counts;
}
