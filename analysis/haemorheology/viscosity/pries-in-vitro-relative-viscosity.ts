import { requireHaematocrit } from '../require-haematocrit.ts';
import { priesCurvature, priesHaematocritFactor, priesWideTube } from './pries-shape.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * Relative apparent viscosity of blood in a glass tube.
 *
 * Formula  η_rel = 1 + (m − 1)((1−H)^C − 1)/(0.55^C − 1); m = 220 e^(−1.3D) + 3.2 − 2.44 e^(−0.06 D^0.645);
 *          C = (0.8 + e^(−0.075D))(w − 1) + w, w = 1/(1 + 10⁻¹¹ D¹²)
 * Units    H fraction (discharge haematocrit, not tube), D um, result 1
 * Shape    scalars
 * Domain   0 ≤ H ≤ 0.9, 3.3 ≤ D ≤ 1978
 * Errors   DomainError naming the argument; never NaN
 * Assumes  high shear rate (50 /s and more)
 * Source   Pries, Neuhaus & Gaehtgens 1992, Am J Physiol 263:H1770 (read in several public codes); reference cases hd-075 to hd-077
 */
export function priesInVitroRelativeViscosity(
  haematocrit: Quantity<'1'>,
  diameter: Quantity<'um'>,
): Quantity<'1'> {
  requireHaematocrit(haematocrit, 0, 0.9);
  requireWithin('diameter', diameter, 3.3, 1978, 'In wider tubes use the bulk limit of the law.');
  const at45 = 220 * Math.exp(-1.3 * diameter) + priesWideTube(diameter);
  return quantity(1 + (at45 - 1) * priesHaematocritFactor(haematocrit, priesCurvature(diameter)));
}
