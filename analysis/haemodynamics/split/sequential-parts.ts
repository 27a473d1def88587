import { hindrances } from './shapley-parts.ts';

/**
 * Parts of a change in resistance units when one factor moves first. They depend on the order: never a primary result.
 *
 * Formula  viscosity first Z₁(η₂−η₁) and η₂(Z₂−Z₁); interaction (η₂−η₁)(Z₂−Z₁)
 * Units    resistances in one unit, viscosities in one unit; parts in the unit of the resistance
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   algebra; reference cases hd-098, hd-099
 */
export function sequentialParts(
  resistance1: number,
  resistance2: number,
  viscosity1: number,
  viscosity2: number,
) {
  const { hindrance1, hindrance2 } = hindrances(resistance1, resistance2, viscosity1, viscosity2);
  return {
    rheologicalFirst: hindrance1 * (viscosity2 - viscosity1),
    vasomotorAfter: viscosity2 * (hindrance2 - hindrance1),
    interaction: (viscosity2 - viscosity1) * (hindrance2 - hindrance1),
  };
}
