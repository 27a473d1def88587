import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Ratio of equivalent radii from two hindrances, at constant length and branching.
 *
 * Formula  r₂/r₁ = (Z₁/Z₂)^(1/4)
 * Units    both hindrances in one unit, result 1
 * Shape    scalars
 * Domain   both > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  recruitment, length and branching constant: say "equivalent radius change", never "vessel radius changed"
 * Source   Hagen-Poiseuille; reference case hd-047
 */
export function radiusRatioFromHindrance(hindrance1: number, hindrance2: number): Quantity<'1'> {
  requirePositive('hindrance1', hindrance1);
  requirePositive('hindrance2', hindrance2);
  return quantity((hindrance1 / hindrance2) ** 0.25);
}
