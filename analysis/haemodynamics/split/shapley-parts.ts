import { requirePositive } from '../../units/require.ts';

/**
 * Parts of a change in resistance units, symmetrical in the order of steps (Shapley).
 *
 * Formula  rheological (η₂−η₁)(Z₁+Z₂)/2, vasomotor (Z₂−Z₁)(η₁+η₂)/2; exact, no residual
 * Units    resistances in one unit, viscosities in one unit; parts in the unit of the resistance
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   Shapley value of two factors; reference cases hd-095, hd-096
 */
export function shapleyParts(
  resistance1: number,
  resistance2: number,
  viscosity1: number,
  viscosity2: number,
) {
  const { hindrance1, hindrance2 } = hindrances(resistance1, resistance2, viscosity1, viscosity2);
  return {
    rheological: ((viscosity2 - viscosity1) * (hindrance1 + hindrance2)) / 2,
    vasomotor: ((hindrance2 - hindrance1) * (viscosity1 + viscosity2)) / 2,
  };
}

/** Hindrances before and after, all four inputs above 0. */
export function hindrances(resistance1: number, resistance2: number, viscosity1: number, viscosity2: number) {
  requirePositive('resistance1', resistance1);
  requirePositive('resistance2', resistance2);
  requirePositive('viscosity1', viscosity1);
  requirePositive('viscosity2', viscosity2);
  return { hindrance1: resistance1 / viscosity1, hindrance2: resistance2 / viscosity2 };
}
