import { choleskyFactor, choleskyInverse, choleskySolve } from '../../numerics/linear-algebra.ts';

/** A curve y = f(x; θ) with its derivatives by the parameters. */
export interface Curve {
  /** f(x; θ); writes the derivatives into `gradient`. */
  evaluate(x: number, parameters: readonly number[], gradient: Float64Array): number;
  /** Whether the parameters lie where the curve is meant to be. */
  isInside(parameters: readonly number[]): boolean;
}

/** A least-squares fit at a stationary point. */
export interface CurveFit {
  parameters: number[];
  residualSumOfSquares: number;
  /** (J'J)⁻¹ at the solution, row-major. */
  unscaledCovariance: Float64Array;
}

/**
 * Least squares from a starting point by Levenberg–Marquardt steps; null without convergence inside the domain.
 *
 * Shape    columns of J are scaled to unit length, so the units of the parameters do not matter
 * Domain   converged when the residual is orthogonal to every column of J within 1e-12 of their lengths, or the fit
 *          is exact to rounding; columns of J that are nearly dependent (a ridge without a lowest point) do not count
 * Source   Marquardt 1963, J SIAM 11:431-441; the criterion as in Bates & Watts 1988, section 2.2.3
 */
export function fitCurve(
  curve: Curve,
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  start: readonly number[],
): CurveFit | null {
  const size = start.length;
  let current = linearise(curve, x, y, start);
  const scale = Array.from(y).reduce((sum, value) => sum + value * value, 0);
  let damping = 1e-3;
  for (let step = 0; step < 500; step += 1) {
    if (!Number.isFinite(current.squares)) return null;
    if (current.offset < 1e-12 || current.squares <= 1e-28 * scale) return finish(current, size);
    const next = dampedStep(curve, x, y, current, damping);
    if (next && next.squares <= current.squares) {
      const stalled = next.squares === current.squares && next.offset >= current.offset;
      current = next;
      damping /= 10;
      if (stalled) break;
    } else {
      damping = Math.max(damping, 1e-12) * 10;
      if (damping > 1e12) break;
    }
  }
  return current.offset < 1e-7 ? finish(current, size) : null;

  function finish(at: Linearised, n: number): CurveFit | null {
    const factor = choleskyFactor(at.crossProducts, n, 1e-10);
    if (typeof factor === 'number' || !curve.isInside(at.parameters)) return null;
    const inverse = choleskyInverse(factor, n);
    const unscaledCovariance = inverse.map(
      (value, k) => value / (at.lengths[Math.floor(k / n)]! * at.lengths[k % n]!),
    );
    return { parameters: at.parameters, residualSumOfSquares: at.squares, unscaledCovariance };
  }
}

interface Linearised {
  parameters: number[];
  squares: number;
  /** Lengths of the columns of J. */
  lengths: number[];
  /** J'J and J'r of the columns scaled to length one. */
  crossProducts: Float64Array;
  slopes: Float64Array;
  /** Largest cosine between the residual and a column of J. */
  offset: number;
}

function linearise(
  curve: Curve,
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  parameters: readonly number[],
): Linearised {
  const size = parameters.length;
  const gradient = new Float64Array(size);
  const crossProducts = new Float64Array(size * size);
  const slopes = new Float64Array(size);
  let squares = 0;
  for (let i = 0; i < x.length; i += 1) {
    const residual = y[i]! - curve.evaluate(x[i]!, parameters, gradient);
    squares += residual * residual;
    for (let j = 0; j < size; j += 1) {
      slopes[j]! += gradient[j]! * residual;
      for (let k = 0; k < size; k += 1) crossProducts[j * size + k]! += gradient[j]! * gradient[k]!;
    }
  }
  const lengths = Array.from({ length: size }, (_, j) => Math.sqrt(crossProducts[j * size + j]!) || 1);
  for (let j = 0; j < size; j += 1) {
    slopes[j]! /= lengths[j]!;
    for (let k = 0; k < size; k += 1) crossProducts[j * size + k]! /= lengths[j]! * lengths[k]!;
  }
  const offset = squares > 0 ? Math.max(...slopes.map(Math.abs)) / Math.sqrt(squares) : 0;
  return { parameters: [...parameters], squares, lengths, crossProducts, slopes, offset };
}

function dampedStep(
  curve: Curve,
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  from: Linearised,
  damping: number,
): Linearised | null {
  const size = from.parameters.length;
  const damped = from.crossProducts.map((value, k) => (k % (size + 1) === 0 ? value * (1 + damping) : value));
  const factor = choleskyFactor(damped, size, 1e-15);
  if (typeof factor === 'number') return null;
  const move = choleskySolve(factor, size, from.slopes);
  const parameters = from.parameters.map((value, j) => value + move[j]! / from.lengths[j]!);
  return curve.isInside(parameters) ? linearise(curve, x, y, parameters) : null;
}
