import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requirePositive } from '../../units/require.ts';

/**
 * Excess flow in percent of the flow debt; it can exceed 100.
 *
 * Formula  100 · excess / debt
 * Units    both mL/dL, result %
 * Shape    scalars
 * Domain   excess finite, debt > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-115
 */
export function debtRepayment(excess: Quantity<'mL/dL'>, debt: Quantity<'mL/dL'>): Quantity<'%'> {
  requireFinite('excess', excess);
  requirePositive('debt', debt);
  return quantity((100 * excess) / debt);
}
