import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Mean cell haemoglobin concentration; far outside 32 to 37 g/dL one of its two inputs is wrong.
 *
 * Formula  MCHC = 100 Hb / Hct%
 * Units    Hb g/dL, Hct percent, result g/dL
 * Shape    scalars
 * Domain   2 ≤ Hb ≤ 25, 0 < Hct ≤ 75
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-129
 */
export function meanCellHaemoglobinConcentration(
  haemoglobin: Quantity<'g/dL'>,
  haematocritPercent: Quantity<'%'>,
): Quantity<'g/dL'> {
  requireWithin('haemoglobin', haemoglobin, 2, 25);
  requirePositive('haematocrit', haematocritPercent);
  requireWithin('haematocrit', haematocritPercent, 0, 75);
  return quantity((100 * haemoglobin) / haematocritPercent);
}
