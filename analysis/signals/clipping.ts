import type { Segment } from './signal.ts';

/**
 * Whether a signal is cut off at its upper limit: flat tops at one highest value that begin and end abruptly.
 *
 * Formula  a plateau of at least 3 samples and 15 ms at the maximum, beside which fewer than 0.15 of its length lie within
 *          1.5 of the smallest steps between samples; beside a rounded peak in coarse digits 0.41 (√2 − 1) do
 * Units    those of the values
 * Shape    an even stretch
 * Domain   finite
 * Errors   none
 * Assumes  square waves look clipped too
 * Source   own rule, by the geometry of a parabola
 */
export function isClipped({ values, step }: Segment): boolean {
  const { highest, smallestStep } = scale(values);
  const least = Math.max(3, Math.ceil(0.015 / step));
  const isNear = (index: number) => index >= 0 && values[index]! >= highest - 1.5 * smallestStep;
  for (let first = 0; first < values.length; first++) {
    if (values[first] !== highest) continue;
    let last = first;
    while (values[last + 1] === highest) last++;
    const length = last - first + 1;
    let beside = 0;
    for (let i = first - 1; isNear(i); i--) beside++;
    for (let i = last + 1; isNear(i); i++) beside++;
    if (length >= least && beside < 0.15 * length) return true;
    first = last;
  }
  return false;
}

function scale(values: Float64Array): { highest: number; smallestStep: number } {
  let highest = -Infinity;
  let smallestStep = Infinity;
  for (let i = 0; i < values.length; i++) {
    if (values[i]! > highest) highest = values[i]!;
    const difference = i === 0 ? 0 : Math.abs(values[i]! - values[i - 1]!);
    if (difference > 0 && difference < smallestStep) smallestStep = difference;
  }
  return { highest, smallestStep };
}
