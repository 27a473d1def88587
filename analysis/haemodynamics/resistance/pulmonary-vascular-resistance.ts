import { pressureDrop } from './pressure-drop.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Pulmonary vascular resistance in Wood units.
 *
 * Formula  PVR = (mPAP − PAWP) / CO
 * Units    pressures mm[Hg], CO L/min, PVR [wood'U]
 * Shape    scalars
 * Domain   mPAP > PAWP, CO > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  wedge pressure at end-expiration; a small difference divides a large error (CV explodes as mPAP nears PAWP)
 * Source   textbook; reference case hd-029
 */
export function pulmonaryVascularResistance(
  meanPulmonaryArterialPressure: Quantity<'mm[Hg]'>,
  pulmonaryArteryWedgePressure: Quantity<'mm[Hg]'>,
  cardiacOutput: Quantity<'L/min'>,
): Quantity<"[wood'U]"> {
  const drop = pressureDrop(meanPulmonaryArterialPressure, pulmonaryArteryWedgePressure, {
    upstream: 'meanPulmonaryArterialPressure',
    downstream: 'pulmonaryArteryWedgePressure',
  });
  requirePositive('cardiacOutput', cardiacOutput);
  return quantity(drop / cardiacOutput);
}
