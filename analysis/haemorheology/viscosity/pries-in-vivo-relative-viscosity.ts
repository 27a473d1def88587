import { requireHaematocrit } from '../require-haematocrit.ts';
import { priesCurvature, priesHaematocritFactor, priesWideTube } from './pries-shape.ts';
import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Relative apparent viscosity of blood in living microvessels, whose wall layer narrows the lumen.
 *
 * Formula  η_rel = (1 + (m − 1) f q) q, q = (D/(D − 1.1))², f = ((1−H)^C − 1)/(0.55^C − 1);
 *          m = 6 e^(−0.085D) + 3.2 − 2.44 e^(−0.06 D^0.645); C as in vitro
 * Units    H fraction (discharge haematocrit), D um, result 1
 * Shape    scalars
 * Domain   0 ≤ H ≤ 0.9, D > 2 (the law has a pole at 1.1); fitted in rat mesentery from about 4 um
 * Errors   DomainError naming the argument; never NaN
 * Assumes  high shear rate; the wall layer of rat mesentery
 * Source   Pries et al. 1994, Circ Res 75:904 (read in public codes); reference cases hd-078, hd-079
 */
export function priesInVivoRelativeViscosity(
  haematocrit: Quantity<'1'>,
  diameter: Quantity<'um'>,
): Quantity<'1'> {
  requireHaematocrit(haematocrit, 0, 0.9);
  if (!(diameter > 2 && Number.isFinite(diameter))) {
    throw new DomainError(
      'diameter',
      'above 2 um',
      diameter,
      'The law has a pole at 1.1 um; give the diameter in um.',
    );
  }
  const at45 = 6 * Math.exp(-0.085 * diameter) + priesWideTube(diameter);
  const narrowing = (diameter / (diameter - 1.1)) ** 2;
  const rise = priesHaematocritFactor(haematocrit, priesCurvature(diameter));
  return quantity((1 + (at45 - 1) * rise * narrowing) * narrowing);
}
