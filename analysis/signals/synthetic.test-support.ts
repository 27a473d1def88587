import type { Signal } from './signal.ts';

/** A repeatable uniform generator, so that a failing noise test fails again. */
export function seededUniform(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 4294967296;
  };
}

export function seededNormal(seed: number): () => number {
  const uniform = seededUniform(seed);
  return () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
}

/** Samples a function of time evenly. */
export function sampled(
  seconds: number,
  rate: number,
  unit: string,
  value: (time: number) => number,
): Signal {
  const times = Float64Array.from({ length: Math.round(seconds * rate) + 1 }, (_, i) => i / rate);
  return { times, unit, values: times.map(value) };
}

/**
 * A pulse with a known mean: a cosine upstroke over 0.15 of the beat, then the square of a cosine fall.
 * Its mean is 0.15/2 + 0.85 · 3/8 = 0.39375 of the pulse, by integration.
 */
export function pulse(phase: number): number {
  const p = phase - Math.floor(phase);
  return p < 0.15
    ? (1 - Math.cos((Math.PI * p) / 0.15)) / 2
    : ((1 + Math.cos((Math.PI * (p - 0.15)) / 0.85)) / 2) ** 2;
}

export const meanOfPulse = 0.39375;
