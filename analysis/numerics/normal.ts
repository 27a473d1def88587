import { requireWithin } from '../units/require.ts';

/**
 * Distribution of the standard normal variable.
 *
 * Formula  rational approximations on |x| < 0.67, < 5.66 and beyond; the exponential is split so that exp(−x²/2)
 *          keeps its digits
 * Domain   any number; ±Infinity answer 0 or 1
 * Accuracy relative 1e-15 near the middle, 1e-14 in either tail down to 1e-308
 * Source   Cody 1969, Math Comp 23:631-637 (coefficients from memory and rounded to doubles, checked against 50-digit values)
 */
export function normalCdf(x: number): number {
  return x <= 0 ? lowerTail(x) : 1 - lowerTail(-x);
}

/** P(Z > x) of the standard normal variable, with full relative accuracy for large x; see `normalCdf`. */
export function normalUpperTail(x: number): number {
  return x >= 0 ? lowerTail(-x) : 1 - lowerTail(x);
}

/** Density of the standard normal variable. */
export function normalDensity(x: number): number {
  return inverseRootTwoPi * expMinusHalfSquare(x);
}

/**
 * Quantile of the standard normal variable: z with P(Z ≤ z) = p. The upper tail is −normalQuantile(q).
 *
 * Domain   p from 0 to 1; 0 and 1 answer ∓Infinity
 * Errors   DomainError naming p
 * Accuracy relative 1e-15
 * Source   Wichura 1988, algorithm AS 241 (coefficients from memory and rounded to doubles, checked against 50-digit values)
 */
export function normalQuantile(p: number): number {
  requireWithin('p', p, 0, 1);
  if (p === 0) return -Infinity;
  if (p === 1) return Infinity;
  const q = p - 0.5;
  if (Math.abs(q) <= 0.425) {
    const r = 0.180625 - q * q;
    return (q * polynomial(quantileA, r)) / polynomial(quantileB, r);
  }
  const r = Math.sqrt(-Math.log(q < 0 ? p : 1 - p));
  const z =
    r <= 5
      ? polynomial(quantileC, r - 1.6) / polynomial(quantileD, r - 1.6)
      : polynomial(quantileE, r - 5) / polynomial(quantileF, r - 5);
  return q < 0 ? -z : z;
}

const inverseRootTwoPi = 0.3989422804014327;
const rootThirtyTwo = 5.65685424949238;

/** P(Z ≤ x) for x at most 0. */
function lowerTail(x: number): number {
  const size = Math.abs(x);
  if (size <= 0.67448975) {
    const square = x * x;
    return 0.5 + (x * polynomial(centreNumerator, square)) / polynomial(centreDenominator, square);
  }
  if (size <= rootThirtyTwo) {
    return (expMinusHalfSquare(x) * polynomial(middleNumerator, size)) / polynomial(middleDenominator, size);
  }
  if (size > 38.6) return 0;
  const inverseSquare = 1 / (x * x);
  const correction =
    (inverseSquare * polynomial(tailNumerator, inverseSquare)) / polynomial(tailDenominator, inverseSquare);
  return (expMinusHalfSquare(x) * (inverseRootTwoPi - correction)) / size;
}

/** exp(−x²/2): x is split into a multiple of 1/16 and a rest, so that squaring loses nothing. */
function expMinusHalfSquare(x: number): number {
  if (Math.abs(x) > 39) return 0;
  const head = Math.trunc(x * 16) / 16;
  return Math.exp(-0.5 * head * head) * Math.exp(-0.5 * (x - head) * (x + head));
}

/** Horner's scheme, lowest power first. */
function polynomial(coefficients: readonly number[], x: number): number {
  let sum = 0;
  for (let i = coefficients.length - 1; i >= 0; i -= 1) sum = sum * x + coefficients[i]!;
  return sum;
}

const centreNumerator = [
  18154.98125334356, 1067.6894854603709, 161.02823106855587, 2.2352520354606837, 0.06568233791820745,
];
const centreDenominator = [45507.78933502673, 10260.932208618979, 976.0985517377767, 47.202581904688245, 1];
const middleNumerator = [
  9842.714838383978, 11602.65143764735, 6848.190450536283, 2494.5375852903726, 597.2702763948002,
  93.50665613217785, 8.883149794388377, 0.39894151208813466, 1.0765576773720192e-8,
];
const middleDenominator = [
  19685.429676859992, 38912.00328609327, 34900.95272114598, 18615.571640885097, 6485.558298266761,
  1519.3775994075547, 235.387901782625, 22.266688044328117, 1,
];
const tailNumerator = [
  2.9112874951168793e-5, 0.0014216191932278934, 0.022235277870649807, 0.12740116116024736, 0.215898534057957,
  0.023073441764940174,
];
const tailDenominator = [
  7.297515550839662e-5, 0.0037823963320275824, 0.06598813786892856, 0.4682382124808651, 1.284260096144911, 1,
];
const quantileA = [
  3.3871328727963665, 133.14166789178438, 1971.5909503065513, 13731.69376550946, 45921.95393154987,
  67265.7709270087, 33430.57558358813, 2509.0809287301227,
];
const quantileB = [
  1, 42.31333070160091, 687.1870074920579, 5394.196021424751, 21213.794301586597, 39307.89580009271,
  28729.085735721943, 5226.495278852854,
];
const quantileC = [
  1.4234371107496835, 4.630337846156546, 5.769497221460691, 3.6478483247632045, 1.2704582524523684,
  0.2417807251774506, 0.022723844989269184, 0.0007745450142783414,
];
const quantileD = [
  1, 2.053191626637759, 1.6763848301838038, 0.6897673349851, 0.14810397642748008, 0.015198666563616457,
  0.0005475938084995345, 1.0507500716444169e-9,
];
const quantileE = [
  6.657904643501103, 5.463784911164114, 1.7848265399172913, 0.29656057182850487, 0.026532189526576124,
  0.0012426609473880784, 2.7115555687434876e-5, 2.0103343992922881e-7,
];
const quantileF = [
  1, 0.599832206555888, 0.1369298809227358, 0.014875361290850615, 0.0007868691311456133,
  1.8463183175100548e-5, 1.421511758316446e-7, 2.0442631033899397e-15,
];
