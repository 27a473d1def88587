/** Where the focus is in a grid of readings. */
export interface Place {
  /** Which field. */
  field: number;
  /** Which reading, from 0. */
  reading: number;
}

export interface GridShape {
  fields: number;
  readings: number;
  /** Readings stand side by side, one line a field; otherwise one line a reading. */
  readingsAcross: boolean;
}

/** Where the caret stands in the text of the cell. */
export interface Caret {
  atStart: boolean;
  atEnd: boolean;
}

/**
 * Where a key leads: arrows to the neighbour, Enter to the next reading of the same field and, after the last one, to
 * the next field. Left and right move the caret first. Nothing when the key does not leave the cell.
 */
export function placeAfterKey(key: string, place: Place, shape: GridShape, caret: Caret): Place | undefined {
  if (key === 'Enter') return nextReading(place, shape);
  const step = arrowStep(key, caret, shape.readingsAcross);
  if (!step) return undefined;
  const next = { field: place.field + step.field, reading: place.reading + step.reading };
  return isInside(next, shape) ? next : undefined;
}

function nextReading({ field, reading }: Place, { fields, readings }: GridShape): Place | undefined {
  if (reading + 1 < readings) return { field, reading: reading + 1 };
  return field + 1 < fields ? { field: field + 1, reading: 0 } : undefined;
}

function arrowStep(key: string, { atStart, atEnd }: Caret, readingsAcross: boolean): Place | undefined {
  const across = readingsAcross ? { field: 0, reading: 1 } : { field: 1, reading: 0 };
  const down = readingsAcross ? { field: 1, reading: 0 } : { field: 0, reading: 1 };
  const back = ({ field, reading }: Place): Place => ({ field: -field, reading: -reading });
  switch (key) {
    case 'ArrowDown':
      return down;
    case 'ArrowUp':
      return back(down);
    case 'ArrowRight':
      return atEnd ? across : undefined;
    case 'ArrowLeft':
      return atStart ? back(across) : undefined;
    default:
      return undefined;
  }
}

const isInside = ({ field, reading }: Place, { fields, readings }: GridShape) =>
  field >= 0 && field < fields && reading >= 0 && reading < readings;
