import { quantityNamed } from '#analysis/quantities/registry.ts';
import { sameDimension } from '#analysis/units/convert.ts';
import { quantityLibrary } from '#schemas/instruments/quantity-library.ts';

/** The quantities an instrument may refer to: the same code that the server records by. */
export const library = quantityLibrary(quantityNamed, sameDimension);
