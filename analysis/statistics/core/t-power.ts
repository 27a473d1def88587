import { noncentralTCdf, noncentralTUpperTail } from '../../numerics/noncentral-t.ts';
import { studentTQuantile } from '../../numerics/student-t.ts';
import type { Direction } from './t-test.ts';

/**
 * Power of a t test at level alpha, both tails counted in a two-sided one.
 *
 * Domain   df above 0 (real numbers allowed), alpha in (0, 1)
 * Source   Cohen 1988, Statistical Power Analysis, chapter 2; the noncentral t distribution itself
 */
export function tTestPower(noncentrality: number, df: number, alpha: number, direction: Direction): number {
  const critical = -studentTQuantile(direction === 'both' ? alpha / 2 : alpha, df);
  const above = direction === 'below' ? 0 : noncentralTUpperTail(critical, df, noncentrality);
  const below = direction === 'above' ? 0 : noncentralTCdf(-critical, df, noncentrality);
  return above + below;
}
