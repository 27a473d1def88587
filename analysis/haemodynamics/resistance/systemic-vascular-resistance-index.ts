import { pressureDrop } from './pressure-drop.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Systemic vascular resistance index: resistance times, never divided by, body surface area.
 *
 * Formula  SVRI = (MAP − CVP) / CI = SVR · BSA
 * Units    pressures mm[Hg], CI L/min/m2, SVRI [wood'U].m2
 * Shape    scalars
 * Domain   MAP > CVP, CI > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   textbook; reference case hd-027
 */
export function systemicVascularResistanceIndex(
  meanArterialPressure: Quantity<'mm[Hg]'>,
  centralVenousPressure: Quantity<'mm[Hg]'>,
  cardiacIndex: Quantity<'L/min/m2'>,
): Quantity<"[wood'U].m2"> {
  const drop = pressureDrop(meanArterialPressure, centralVenousPressure, {
    upstream: 'meanArterialPressure',
    downstream: 'centralVenousPressure',
  });
  requirePositive('cardiacIndex', cardiacIndex);
  return quantity(drop / cardiacIndex);
}
