import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * Viscosity of blood at 208 /s estimated from haematocrit and total protein; the grouping of its constant is inferred.
 *
 * Formula  η = 0.12 Hp + 0.17 TP − 2.07
 * Units    Hp percent, TP g/dL, result mPa.s
 * Shape    scalars
 * Domain   Hp 20 to 65, TP 2 to 15 g/dL
 * Errors   DomainError naming the argument; never NaN
 * Assumes  the constant stands outside the bracket: as printed, the formula gives impossible values at its other shear rate
 * Source   de Simone et al. 1990, Circulation 81:107 (coefficients from later papers; unit of protein confirmed by the SDs of
 *          Tamariz et al. 2008, Am J Epidemiol 168:1153); reference case hd-074
 */
export function deSimoneViscosity(
  haematocritPercent: Quantity<'%'>,
  totalProtein: Quantity<'g/dL'>,
): Quantity<'mPa.s'> {
  requireWithin('haematocrit', haematocritPercent, 20, 65);
  requireWithin(
    'totalProtein',
    totalProtein,
    2,
    15,
    'Total protein is about 7 g/dL (70 g/L); check its unit.',
  );
  return quantity(0.12 * haematocritPercent + 0.17 * totalProtein - 2.07);
}
