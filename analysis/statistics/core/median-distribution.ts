import { incompleteBeta } from '../../numerics/incomplete-beta.ts';
import { logGamma } from '../../numerics/log-gamma.ts';

/** A discrete distribution: values rising, each once, with their probabilities. */
export interface DiscreteDistribution {
  values: number[];
  probabilities: number[];
}

/** Cells below this probability are left out; they could not move a result. */
const negligible = 1e-20;

/**
 * Distribution of the median over all nⁿ resamples of the values, exactly: what resampling approaches.
 *
 * Formula  odd n: the middle order statistic of a resample is the i-th value with probability B(i) − B(i − 1),
 *          B(i) = P(Bin(n, i/n) ≥ (n + 1)/2). Even n, k = n/2: the two middle ones are the i-th and j-th, i < j, with
 *          C(n, k)[(i/n)^k − ((i−1)/n)^k][((n−j+1)/n)^k − ((n−j)/n)^k], and both the i-th with what is left of B(i) − B(i − 1)
 * Source   Maritz & Jarrett 1978, JASA 73:194-196; Efron 1982, The Jackknife, the Bootstrap, section 10.4
 */
export function resampledMedianDistribution(values: ArrayLike<number>): DiscreteDistribution {
  const sorted = Float64Array.from(values).sort();
  const n = sorted.length;
  const middle = (n + 1) >> 1;
  const cells: { value: number; probability: number }[] = [];
  for (let i = 1; i <= n; i += 1) {
    let left = atLeast(n, middle, i) - atLeast(n, middle, i - 1);
    if (left < negligible) continue;
    if (n % 2 === 0) {
      const below = powerStep(i, n, middle);
      for (let j = i + 1; j <= n; j += 1) {
        const probability = Math.exp(logCentralBinomial(n) + below + powerStep(n - j + 1, n, middle));
        if (probability < negligible) break;
        left -= probability;
        cells.push({ value: (sorted[i - 1]! + sorted[j - 1]!) / 2, probability });
      }
    }
    cells.push({ value: sorted[i - 1]!, probability: Math.max(0, left) });
  }
  return merged(cells.sort((a, b) => a.value - b.value));
}

/** P(Bin(n, i/n) ≥ k): at least k of n draws fall on the first i values. */
function atLeast(n: number, k: number, i: number): number {
  if (i === 0) return 0;
  return i === n ? 1 : incompleteBeta(i / n, (n - i) / n, k, n - k + 1);
}

/** ln[(i/n)^k − ((i − 1)/n)^k]. */
function powerStep(i: number, n: number, k: number): number {
  return k * Math.log(i / n) + Math.log(-Math.expm1(k * Math.log1p(-1 / i)));
}

function logCentralBinomial(n: number): number {
  return logGamma(n + 1) - 2 * logGamma(n / 2 + 1);
}

function merged(cells: readonly { value: number; probability: number }[]): DiscreteDistribution {
  const result: DiscreteDistribution = { values: [], probabilities: [] };
  for (const { value, probability } of cells) {
    const last = result.values.length - 1;
    if (last >= 0 && result.values[last] === value) result.probabilities[last]! += probability;
    else {
      result.values.push(value);
      result.probabilities.push(probability);
    }
  }
  return result;
}
