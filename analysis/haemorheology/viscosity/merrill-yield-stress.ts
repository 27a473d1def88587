import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Yield stress of blood by Merrill's cube-root law.
 *
 * Formula  τy = (A (Hp − Hm)/100)³
 * Units    A (dyn/cm2)^(1/3), Hp and Hm percent, τy dyn/cm2 (0.1 Pa)
 * Shape    scalars
 * Domain   A > 0; 0 ≤ Hm < 100; Hp up to 75; 0 at and below Hm
 * Errors   DomainError naming the argument; never NaN
 * Assumes  normal fibrinogen; A 0.8 ± 0.2, Hm 3 to 8
 * Source   Merrill 1963, 1969 (from memory; about 0.04 dyn/cm2 at 40 % in print); reference case hd-089
 */
export function merrillYieldStress(
  coefficient: Quantity<'{cube_root_of_dyn_per_cm2}'>,
  haematocritPercent: Quantity<'%'>,
  criticalHaematocritPercent: Quantity<'%'>,
): Quantity<'dyn/cm2'> {
  requirePositive('coefficient', coefficient);
  requireWithin('haematocrit', haematocritPercent, 0, 100);
  requireWithin('criticalHaematocrit', criticalHaematocritPercent, 0, 100);
  return quantity(Math.max(0, (coefficient * (haematocritPercent - criticalHaematocritPercent)) / 100) ** 3);
}
