import { requirePositive, requireWithin } from '../units/require.ts';
import { incompleteBeta, logBetaKernel } from './incomplete-beta.ts';
import { logGamma } from './log-gamma.ts';
import { normalQuantile } from './normal.ts';
import { quantileOfTail } from './tail-quantile.ts';

/**
 * P(|T| > |t|) of Student's t distribution with df degrees of freedom (real numbers allowed).
 *
 * Formula  I_x(df/2, ½), x = df/(df + t²); its first term where t² overflows
 * Domain   t any number (±Infinity answer 0); df finite and above 0
 * Errors   DomainError naming df
 * Source   Abramowitz & Stegun 1964, 26.7.1
 */
export function studentTTwoSided(t: number, df: number): number {
  requirePositive('df', df);
  if (Math.abs(t) === Infinity) return 0;
  const { x, y } = shares(t, df);
  if (x < 1e-280) return Math.exp(logFirstTerm(Math.abs(t), df));
  return incompleteBeta(x, y, df / 2, 0.5);
}

/** P(T > t), with full relative accuracy for large t; see `studentTTwoSided`. */
export function studentTUpperTail(t: number, df: number): number {
  const half = 0.5 * studentTTwoSided(t, df);
  return t >= 0 ? half : 1 - half;
}

/** P(T ≤ t), with full relative accuracy for very negative t; see `studentTTwoSided`. */
export function studentTCdf(t: number, df: number): number {
  return studentTUpperTail(-t, df);
}

/**
 * Quantile of Student's t distribution: t with P(T ≤ t) = p. The upper quantile is −studentTQuantile(q, df).
 *
 * Domain   p from 0 to 1 (0 and 1 answer ∓Infinity); df finite and above 0
 * Errors   DomainError naming the argument
 */
export function studentTQuantile(p: number, df: number): number {
  requireWithin('p', p, 0, 1);
  requirePositive('df', df);
  if (p === 0.5) return 0;
  if (p === 0) return -Infinity;
  if (p === 1) return Infinity;
  const central = Math.abs(p - 0.5) < 0.25;
  const size = quantileOfTail({
    tail: (t) => (central ? centralShare(t, df) : studentTTwoSided(t, df)),
    slope: (t) => twiceDensityTimes(t, df),
    probability: central ? 2 * Math.abs(p - 0.5) : 2 * Math.min(p, 1 - p),
    rising: central,
    start: Math.abs(normalQuantile(p)),
  });
  return p < 0.5 ? -size : size;
}

function shares(t: number, df: number): { x: number; y: number } {
  const ratio = (t / df) * t;
  return ratio === Infinity ? { x: 0, y: 1 } : { x: 1 / (1 + ratio), y: ratio / (1 + ratio) };
}

/** P(|T| ≤ t). */
function centralShare(t: number, df: number): number {
  const { x, y } = shares(t, df);
  return incompleteBeta(y, x, 0.5, df / 2);
}

function twiceDensityTimes(t: number, df: number): number {
  const { x, y } = shares(t, df);
  return x < 1e-280 ? df * Math.exp(logFirstTerm(t, df)) : 2 * Math.exp(logBetaKernel(x, y, df / 2, 0.5));
}

/** ln of x^a / (a B(a, ½)) with a = df/2 and x = df/t². */
function logFirstTerm(t: number, df: number): number {
  const a = df / 2;
  return (
    a * (Math.log(df) - 2 * Math.log(t)) - Math.log(a) - (logGamma(a) + logGamma(0.5) - logGamma(a + 0.5))
  );
}
