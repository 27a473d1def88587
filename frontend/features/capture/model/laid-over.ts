import type { HiddenValue, Operation, ValueDto } from '#schemas/api/capture.ts';

type Values = Record<string, ValueDto | HiddenValue>;

/** The entry as the server has it with what is not stored yet laid over it: a save never takes back what is typed. */
export function laidOver(stored: Values, operations: readonly Operation[]): Values {
  const shown = { ...stored };
  for (const { pointer, value, written, missing, rejected } of operations) {
    const address = rejected === undefined ? pointer : `${pointer}!rejected`;
    const next = rejected ?? value;
    if (missing !== undefined) shown[address] = { missing };
    else if (next === null || next === undefined) delete shown[address];
    else shown[address] = { value: next, ...(written === undefined ? {} : { written }) };
  }
  return shown;
}
