import { pulsePressure } from './pulse-pressure.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Mean arterial pressure by the one-third rule.
 *
 * Formula  MAP = DBP + PP/3
 * Units    mm[Hg]
 * Shape    scalars
 * Domain   SBP > DBP; meant for rest at 50 to 100 beats a minute
 * Errors   DomainError naming the argument; never NaN
 * Assumes  the rule under-reads the brachial waveform mean by about 5 mmHg on average (Papaioannou 2016 Hypertens Res)
 * Source   textbook; reference case hd-010 (120/80 gives 93.3)
 */
export function meanArterialPressureOneThird(
  systolicPressure: Quantity<'mm[Hg]'>,
  diastolicPressure: Quantity<'mm[Hg]'>,
): Quantity<'mm[Hg]'> {
  return quantity(diastolicPressure + pulsePressure(systolicPressure, diastolicPressure) / 3);
}
