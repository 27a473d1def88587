import { symmetricEigen } from '../../numerics/linear-algebra-eigen.ts';
import { bilinearForm, innerProduct } from '../../numerics/linear-algebra.ts';

/** A point with value, gradient and row-major Hessian of the objective there. */
export interface Evaluation<Detail> {
  readonly point: Float64Array;
  readonly value: number;
  readonly gradient: Float64Array;
  readonly hessian: Float64Array;
  readonly detail: Detail;
}

/** Null where the objective cannot be evaluated. */
export type Objective<Detail> = (point: Float64Array) => Evaluation<Detail> | null;

const MAXIMUM_STEPS = 200;
/** Changes of the objective below this part of its size are rounding. */
const ROUNDING = 1e-13;
const CONVERGED = 1e-12;

/**
 * A local minimum by Newton steps with exact second derivatives inside a trust region.
 *
 * Directions of negative curvature are followed downhill (the absolute eigenvalues are used), a step that does
 * not keep half of its promise shrinks the region. Once the promise is below rounding, steps are taken as long
 * as they make the gradient smaller, so the point has the accuracy of the gradient, not that of the objective.
 *
 * Errors  null without convergence
 * Source  Nocedal and Wright 2006, Numerical Optimization, chapter 4 (from memory)
 */
export function minimise<Detail>(
  objective: Objective<Detail>,
  start: Float64Array,
): Evaluation<Detail> | null {
  let current = objective(start);
  if (current === null) return null;
  const n = start.length;
  let radius = 0.5 * (norm(start) + 0.5);
  for (let iteration = 0; iteration < MAXIMUM_STEPS; iteration += 1) {
    const step = newtonStep(current, radius);
    const length = norm(step);
    if (length <= CONVERGED * (norm(current.point) + 1e-3)) return current;
    const promise =
      -innerProduct(current.gradient, step) - 0.5 * bilinearForm(current.hessian, n, step, step);
    const next: Evaluation<Detail> | null = objective(current.point.map((value, i) => value + step[i]!));
    if (promise <= ROUNDING * (1 + Math.abs(current.value))) {
      if (next === null || norm(next.gradient) >= norm(current.gradient)) return current;
      current = next;
      continue;
    }
    const gain = next === null ? -Infinity : current.value - next.value;
    if (gain < 0.25 * promise) radius = 0.25 * length;
    else if (gain > 0.7 * promise && length > 0.9 * radius) radius *= 3;
    if (next !== null && gain > 1e-4 * promise) current = next;
  }
  return null;
}

function newtonStep({ gradient, hessian }: Evaluation<unknown>, radius: number): Float64Array {
  const n = gradient.length;
  const { values, vectors } = symmetricEigen(hessian, n);
  const floor = 1e-14 * Math.max(...values.map(Math.abs));
  const step = new Float64Array(n);
  vectors.forEach((vector, k) => {
    const along = innerProduct(vector, gradient);
    if (along === 0) return;
    const length = -along / Math.max(Math.abs(values[k]!), floor, Number.MIN_VALUE);
    for (let i = 0; i < n; i += 1) step[i]! += length * vector[i]!;
  });
  const length = norm(step);
  return length <= radius ? step : step.map((value) => (value * radius) / length);
}

function norm(x: Float64Array): number {
  return Math.hypot(...x);
}
