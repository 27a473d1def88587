import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireCount, requireEachPositive } from '../../units/require.ts';

/**
 * Resistance of beds side by side: conductances add.
 *
 * Formula  1/R = Σ 1/Rᵢ
 * Units    one unit of resistance for all
 * Shape    one series, at least 1 resistance
 * Domain   each > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   textbook; reference case hd-038
 */
export function resistanceInParallel<Unit extends string>(
  resistances: readonly Quantity<Unit>[],
): Quantity<Unit> {
  requireCount('resistances', resistances, 1);
  requireEachPositive('resistances', resistances);
  return quantity(1 / resistances.reduce<number>((sum, resistance) => sum + 1 / resistance, 0));
}
