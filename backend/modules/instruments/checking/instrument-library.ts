import { quantityNamed } from '#analysis/quantities/registry.ts';
import { sameDimension } from '#analysis/units/convert.ts';
import { quantityLibrary } from '#schemas/instruments/quantity-library.ts';

/** The quantities of the analysis, as instruments refer to them. */
export const instrumentLibrary = quantityLibrary(quantityNamed, sameDimension);
