import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requireNotNegative, requirePositive } from '../../units/require.ts';

/**
 * Sigmoid dose-response curve.
 *
 * Formula  E = E₀ + Emax Dⁿ / (ED50ⁿ + Dⁿ)
 * Units    E₀ and Emax in one unit, ED50 and D in one unit, n 1
 * Shape    scalars
 * Domain   ED50 > 0, n > 0, D ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Source   Hill equation; reference case hd-116
 */
export function sigmoidResponse<Unit extends string>(
  baselineEffect: Quantity<Unit>,
  maximalEffect: Quantity<Unit>,
  halfMaximalDose: number,
  hillSlope: Quantity<'1'>,
  dose: number,
): Quantity<Unit> {
  requireFinite('baselineEffect', baselineEffect);
  requireFinite('maximalEffect', maximalEffect);
  requirePositive('halfMaximalDose', halfMaximalDose);
  requirePositive('hillSlope', hillSlope);
  requireNotNegative('dose', dose);
  // As a ratio, so that large powers neither overflow nor cancel.
  const occupied = dose === 0 ? 0 : 1 / (1 + (halfMaximalDose / dose) ** hillSlope);
  return quantity(baselineEffect + maximalEffect * occupied);
}
