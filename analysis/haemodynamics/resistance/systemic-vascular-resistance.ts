import { pressureDrop } from './pressure-drop.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Systemic vascular resistance in Wood units.
 *
 * Formula  SVR = (MAP − CVP) / CO
 * Units    pressures mm[Hg], CO L/min, SVR [wood'U]; 1 Wood unit is 79.993432449 dyn.s/cm5
 * Shape    scalars
 * Domain   MAP > CVP, CO > 0. Without a CVP there is no SVR: use total peripheral resistance
 * Errors   DomainError naming the argument; never NaN
 * Assumes  pressures and output of one condition
 * Source   textbook; reference case hd-025
 */
export function systemicVascularResistance(
  meanArterialPressure: Quantity<'mm[Hg]'>,
  centralVenousPressure: Quantity<'mm[Hg]'>,
  cardiacOutput: Quantity<'L/min'>,
): Quantity<"[wood'U]"> {
  const drop = pressureDrop(meanArterialPressure, centralVenousPressure, {
    upstream: 'meanArterialPressure',
    downstream: 'centralVenousPressure',
  });
  requirePositive('cardiacOutput', cardiacOutput);
  return quantity(drop / cardiacOutput);
}
