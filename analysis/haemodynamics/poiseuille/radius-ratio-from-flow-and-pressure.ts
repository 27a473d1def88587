import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Ratio of equivalent radii from the ratios of flow, driving pressure and viscosity.
 *
 * Formula  r₂/r₁ = ((Q₂/Q₁)(η₂/η₁)/(ΔP₂/ΔP₁))^(1/4)
 * Units    1
 * Shape    scalars
 * Domain   all ratios > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  length and branching constant
 * Source   Hagen-Poiseuille solved for r; reference case hd-048
 */
export function radiusRatioFromFlowAndPressure(
  flowRatio: Quantity<'1'>,
  pressureRatio: Quantity<'1'>,
  viscosityRatio: Quantity<'1'>,
): Quantity<'1'> {
  requirePositive('flowRatio', flowRatio);
  requirePositive('pressureRatio', pressureRatio);
  requirePositive('viscosityRatio', viscosityRatio);
  return quantity(((flowRatio * viscosityRatio) / pressureRatio) ** 0.25);
}
