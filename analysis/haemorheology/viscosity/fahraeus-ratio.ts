import { requireHaematocrit } from '../require-haematocrit.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * Tube haematocrit over discharge haematocrit: cells run faster than plasma in narrow tubes (Fåhræus effect).
 *
 * Formula  HT/HD = HD + (1 − HD)(1 + 1.7 e^(−0.415D) − 0.6 e^(−0.011D))
 * Units    HD fraction, D um, result 1
 * Shape    scalars
 * Domain   0 ≤ HD < 1, 3 ≤ D ≤ 1000
 * Errors   DomainError naming the argument; never NaN
 * Source   Pries et al. 1990, Circ Res 67:826 (read in four public codes); reference case hd-088
 */
export function fahraeusRatio(haematocrit: Quantity<'1'>, diameter: Quantity<'um'>): Quantity<'1'> {
  requireHaematocrit(haematocrit);
  requireWithin(
    'diameter',
    diameter,
    3,
    1000,
    'Give the diameter in um; in wider vessels the effect is nil.',
  );
  const plasmaSide = 1 + 1.7 * Math.exp(-0.415 * diameter) - 0.6 * Math.exp(-0.011 * diameter);
  return quantity(haematocrit + (1 - haematocrit) * plasmaSide);
}
