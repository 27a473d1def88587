import { splitOfChange } from './split-of-change.ts';

/**
 * Parts of a change in resistance units by the logarithmic mean: the log-changes scaled to add up to R₂ − R₁.
 *
 * Formula  L ln(η₂/η₁) and L ln(Z₂/Z₁), L = (R₂−R₁)/ln(R₂/R₁), which tends to R₁ where the resistances are equal
 * Units    resistances in one unit, viscosities in one unit; parts in the unit of the resistance
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   Ang 2004 (from memory); Ang, Huang & Mu 2009, Energy Policy; reference case hd-097
 */
export function logarithmicMeanParts(
  resistance1: number,
  resistance2: number,
  viscosity1: number,
  viscosity2: number,
) {
  const { total, rheological, geometric } = splitOfChange(resistance1, resistance2, viscosity1, viscosity2);
  // (R₂−R₁)/ln(R₂/R₁) loses its digits as the two meet; R₁ (e^B − 1)/B does not.
  const logarithmicMean = total === 0 ? resistance1 : (resistance1 * Math.expm1(total)) / total;
  return { rheological: logarithmicMean * rheological, vasomotor: logarithmicMean * geometric };
}
