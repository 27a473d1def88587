import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative, requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Oxygen content of blood: bound to haemoglobin and dissolved.
 *
 * Formula  CaO₂ = Hb h S + a PO₂
 * Units    Hb g/dL, h mL/g, S 1, PO₂ kPa, a mL/dL/kPa, result mL/dL
 * Shape    scalars
 * Domain   Hb > 0; 1.2 ≤ h ≤ 1.45; 0 ≤ S ≤ 1; PO₂ ≥ 0; 0.01 ≤ a ≤ 0.05
 * Errors   DomainError naming the argument; never NaN
 * Assumes  no carboxy- or methaemoglobin; h is the study's named constant (1.34, 1.36 and 1.39 are in use)
 * Source   textbook; reference cases hd-118 to hd-121. The range of a (0.0225 is usual) catches one per mmHg taken for one per kPa
 */
export function oxygenContent(
  haemoglobin: Quantity<'g/dL'>,
  saturation: Quantity<'1'>,
  oxygenPressure: Quantity<'kPa'>,
  huefnerConstant: Quantity<'mL/g'>,
  solubility: Quantity<'mL/dL/kPa'>,
): Quantity<'mL/dL'> {
  requirePositive('haemoglobin', haemoglobin);
  requireWithin('saturation', saturation, 0, 1, 'Give a fraction of 1, or state the unit %.');
  requireNotNegative('oxygenPressure', oxygenPressure);
  requireWithin('huefnerConstant', huefnerConstant, 1.2, 1.45);
  requireWithin(
    'solubility',
    solubility,
    0.01,
    0.05,
    'About 0.0225 mL/dL/kPa, which is 0.003 mL/dL/mm[Hg]; check its unit.',
  );
  return quantity(haemoglobin * huefnerConstant * saturation + solubility * oxygenPressure);
}
