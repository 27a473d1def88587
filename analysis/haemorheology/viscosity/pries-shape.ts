/** Curvature C of the Pries laws: how steeply viscosity rises with haematocrit in a tube of a diameter (um). */
export function priesCurvature(diameter: number): number {
  const weight = 1 / (1 + 1e-11 * diameter ** 12);
  return (0.8 + Math.exp(-0.075 * diameter)) * (weight - 1) + weight;
}

/** Rise with haematocrit, scaled to 1 at 0.45. */
export function priesHaematocritFactor(haematocrit: number, curvature: number): number {
  return ((1 - haematocrit) ** curvature - 1) / (0.55 ** curvature - 1);
}

/** The part of the viscosity at 0.45 that both Pries laws share and that tends to 3.2 in wide tubes. */
export function priesWideTube(diameter: number): number {
  return 3.2 - 2.44 * Math.exp(-0.06 * diameter ** 0.645);
}
