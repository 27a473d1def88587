import { requireWithin } from '../units/require.ts';

/**
 * Distribution of the standard normal variable.
 *
 * Formula  rational approximations on |x| < 0.67, < 5.66 and beyond; the exponential is split so that exp(−x²/2)
 *          keeps its digits
 * Domain   any number; ±Infinity answer 0 or 1
 * Accuracy relative 1e-15 near the middle, 1e-14 in either tail down to 1e-308
 * Source   Cody 1969, Math Comp 23:631-637 (coefficients from memory, checked against 50-digit values)
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
 * Source   Wichura 1988, algorithm AS 241 (coefficients from memory, checked against 50-digit values)
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

const inverseRootTwoPi = 0.39894228040143267794;
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
  18154.981253343561249, 1067.6894854603709582, 161.02823106855587881, 2.2352520354606839287,
  0.065682337918207449113,
];
const centreDenominator = [
  45507.789335026729956, 10260.932208618978205, 976.09855173777669322, 47.20258190468824187, 1,
];
const middleNumerator = [
  9842.7148383839780218, 11602.651437647350124, 6848.1904505362823326, 2494.5375852903726711,
  597.27027639480026226, 93.506656132177855979, 8.8831497943883759412, 0.39894151208813466764,
  1.0765576773720192317e-8,
];
const middleDenominator = [
  19685.429676859990727, 38912.003286093271411, 34900.952721145977266, 18615.571640885098091,
  6485.558298266760755, 1519.377599407554805, 235.38790178262499861, 22.266688044328115691, 1,
];
const tailNumerator = [
  2.9112874951168792e-5, 0.001421619193227893466, 0.022235277870649807, 0.1274011611602473639,
  0.21589853405795699, 0.02307344176494017303,
];
const tailDenominator = [
  7.29751555083966205e-5, 0.00378239633202758244, 0.0659881378689285515, 0.468238212480865118,
  1.28426009614491121, 1,
];
const quantileA = [
  3.387132872796366608, 133.14166789178437745, 1971.5909503065514427, 13731.693765509461125,
  45921.953931549871457, 67265.770927008700853, 33430.575583588128105, 2509.0809287301226727,
];
const quantileB = [
  1, 42.313330701600911252, 687.1870074920579083, 5394.1960214247511077, 21213.794301586595867,
  39307.89580009271061, 28729.085735721942674, 5226.495278852854561,
];
const quantileC = [
  1.42343711074968357734, 4.6303378461565452959, 5.7694972214606914055, 3.64784832476320460504,
  1.27045825245236838258, 0.24178072517745061177, 0.0227238449892691845833, 7.7454501427834140764e-4,
];
const quantileD = [
  1, 2.05319162663775882187, 1.6763848301838038494, 0.68976733498510000455, 0.14810397642748007459,
  0.0151986665636164571966, 5.475938084995344946e-4, 1.05075007164441684324e-9,
];
const quantileE = [
  6.6579046435011037772, 5.4637849111641143699, 1.7848265399172913358, 0.29656057182850489123,
  0.026532189526576123093, 0.0012426609473880784386, 2.71155556874348757815e-5, 2.01033439929228813265e-7,
];
const quantileF = [
  1, 0.59983220655588793769, 0.13692988092273580531, 0.0148753612908506148525, 7.868691311456132591e-4,
  1.8463183175100546818e-5, 1.4215117583164458887e-7, 2.04426310338993978564e-15,
];
