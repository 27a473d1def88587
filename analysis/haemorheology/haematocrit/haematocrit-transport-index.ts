import { requireHaematocrit } from '../require-haematocrit.ts';
import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requirePositive } from '../../units/require.ts';

/**
 * Haematocrit over relative viscosity: the oxygen that a fixed driving pressure moves, up to a constant.
 *
 * Formula  H / η_rel
 * Units    H fraction, η_rel 1, result 1
 * Shape    scalars
 * Domain   0 < H < 1, η_rel ≥ 1
 * Errors   DomainError naming the argument; never NaN
 * Assumes  exploratory only; its maximum depends on law, shear rate and vessel, and is no target
 * Source   idea of Chien 1975; Reinhart 2016 (how far optima differ); reference case hd-125
 */
export function haematocritTransportIndex(
  haematocrit: Quantity<'1'>,
  relativeViscosity: Quantity<'1'>,
): Quantity<'1'> {
  requirePositive('haematocrit', haematocrit);
  requireHaematocrit(haematocrit);
  requireFinite('relativeViscosity', relativeViscosity);
  if (relativeViscosity < 1) throw new DomainError('relativeViscosity', 'at least 1', relativeViscosity);
  return quantity(haematocrit / relativeViscosity);
}
