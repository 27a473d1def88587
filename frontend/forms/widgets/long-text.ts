import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';

const oneLine = 120;

/** Own words take several lines, unless the instrument keeps them short. */
export const isLong = (field: CompiledField | undefined, maxLength = Infinity): boolean =>
  field?.visibility.freeText === true && maxLength > oneLine;
