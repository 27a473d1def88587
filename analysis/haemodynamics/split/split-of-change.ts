import { logChange } from './log-change.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/** A change of resistance on the log scale: B = A + G. */
export interface SplitParts {
  /** B: ln of the ratio of resistances. */
  readonly total: Quantity<'1'>;
  /** A: ln of the ratio of viscosities. */
  readonly rheological: Quantity<'1'>;
  /** G = B − A: ln of the ratio of hindrances, the vasomotor part. */
  readonly geometric: Quantity<'1'>;
}

/**
 * Splits a change of resistance into what the blood did and what the vessels did.
 *
 * Formula  ln(R₂/R₁) = ln(η₂/η₁) + ln(Z₂/Z₁), R = η Z
 * Units    resistances in one unit, viscosities in one unit, parts 1
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  Poiseuille's law with a viscosity taken at one shear rate and temperature; one method of mean pressure at both times
 * Source   algebra; haemodynamics reference 6.1; reference cases hd-091, hd-092
 */
export function splitOfChange(
  resistance1: number,
  resistance2: number,
  viscosity1: number,
  viscosity2: number,
): SplitParts {
  const total = logChange(resistance1, resistance2, { before: 'resistance1', after: 'resistance2' });
  const rheological = logChange(viscosity1, viscosity2, { before: 'viscosity1', after: 'viscosity2' });
  return { total, rheological, geometric: quantity(total - rheological) };
}
