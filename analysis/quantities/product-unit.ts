import { multiplyUnits, parseUnit, writeUnit } from '../units/parse-unit.ts';

/** UCUM code of the product of two units, like terms cancelled: s and /s give 1. */
export function productUnit(one: string, other: string): string {
  return writeUnit(multiplyUnits(parseUnit(one), parseUnit(other)));
}
