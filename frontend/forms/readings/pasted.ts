import type { GridShape, Place } from './grid-keys.ts';

export interface PastedReadings {
  cells: (Place & { text: string })[];
  /** What found no place. */
  left: string[];
}

/**
 * Lays a copied range over a grid from the cell that has the focus. Lines are readings and columns are fields, as a
 * spreadsheet holds them; one single line is laid along the readings where they stand side by side.
 */
export function layPasted(text: string, from: Place, shape: GridShape): PastedReadings {
  const lines = text
    .replace(/(\r?\n)+$/, '')
    .split(/\r?\n/)
    .map((line) => line.split('\t'));
  const turned = lines.length === 1 && shape.readingsAcross;
  const cells: PastedReadings['cells'] = [];
  const left: string[] = [];
  for (const [down, line] of lines.entries()) {
    for (const [across, content] of line.entries()) {
      const written = content.trim();
      if (written === '') continue;
      const place = {
        field: from.field + (turned ? down : across),
        reading: from.reading + (turned ? across : down),
      };
      const fits = place.field < shape.fields && place.reading < shape.readings;
      if (fits) cells.push({ ...place, text: written });
      else left.push(written);
    }
  }
  return { cells, left };
}

/** Whether copied text is more than one value. */
export const isRange = (text: string): boolean => /[\t\n]/.test(text.replace(/(\r?\n)+$/, ''));
