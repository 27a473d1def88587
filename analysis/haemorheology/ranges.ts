import type { CautionCode } from '../cautions/cautions.ts';
import { DomainError } from '../units/errors.ts';
import type { Quantity } from '../units/quantity.ts';

export type CautionCodes = readonly (CautionCode | false | undefined)[];

/** Bulk viscosity means nothing where cells pass in single file, and is too high in small vessels. */
export function bulkLawCautions(diameter: Quantity<'um'> | undefined): CautionCodes {
  if (diameter === undefined) return [];
  if (!(diameter >= 10)) {
    throw new DomainError(
      'diameter',
      'at least 10 um for a bulk law',
      diameter,
      'Use a Pries law, which takes the diameter.',
    );
  }
  return [diameter < 300 && 'SMALL_VESSEL'];
}

/** Laws measured at high shear say nothing about slow flow. */
export function highShearCautions(shearRate: Quantity<'/s'> | undefined, least: number): CautionCodes {
  return [shearRate !== undefined && shearRate < least && 'SHEAR_RANGE'];
}

export function haematocritCautions(haematocrit: number, low: number, high: number): CautionCodes {
  return [
    (haematocrit < low || haematocrit > high) && 'HAEMATOCRIT_RANGE',
    haematocrit >= 0.65 && 'TRAPPED_PLASMA',
  ];
}

/** Published for 35 to 50 % and 23 to 233 /s. */
export function walburnSchneckCautions(haematocrit: number, shearRate: number): CautionCodes {
  return [
    ...haematocritCautions(haematocrit, 0.35, 0.5),
    (shearRate < 23 || shearRate > 233) && 'SHEAR_RANGE',
  ];
}

/** Coefficients that follow haematocrit: fitted for 0.1 to 0.65; Cokelet's turn round below 0.05 /s. */
export function quemadaCautions(haematocrit: number, shearRate: number): CautionCodes {
  return [...haematocritCautions(haematocrit, 0.1, 0.65), shearRate < 0.05 && 'SHEAR_RANGE'];
}
