import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireCount, requireEachPositive } from '../../units/require.ts';

/**
 * Resistance of beds one after the other.
 *
 * Formula  R = Σ Rᵢ
 * Units    one unit of resistance for all
 * Shape    one series, at least 1 resistance
 * Domain   each > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   textbook; reference case hd-037
 */
export function resistanceInSeries<Unit extends string>(
  resistances: readonly Quantity<Unit>[],
): Quantity<Unit> {
  requireCount('resistances', resistances, 1);
  requireEachPositive('resistances', resistances);
  return quantity(resistances.reduce<number>((sum, resistance) => sum + resistance, 0));
}
