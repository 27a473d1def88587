import { splitOfChange } from './split-of-change.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Change of the equivalent radius in percent.
 *
 * Formula  100 ((Z₁/Z₂)^(1/4) − 1)
 * Units    resistances in one unit, viscosities in one unit, result %
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  recruitment, length and branching constant
 * Source   Hagen-Poiseuille; reference case hd-100
 */
export function equivalentRadiusChange(
  resistance1: number,
  resistance2: number,
  viscosity1: number,
  viscosity2: number,
): Quantity<'%'> {
  const { geometric } = splitOfChange(resistance1, resistance2, viscosity1, viscosity2);
  return quantity(100 * Math.expm1(geometric / -4));
}
