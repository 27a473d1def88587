/** A cross-product of [X y] by its blocks: X'X (row-major), X'y and y'y. */
export interface CrossProducts {
  readonly matrix: Float64Array;
  readonly vector: Float64Array;
  readonly corner: number;
}

/** Unpacks the lower triangle of a cross-product whose last row is the outcome's. */
export function unpack(packed: Float64Array, p: number): CrossProducts {
  const matrix = new Float64Array(p * p);
  let element = 0;
  for (let i = 0; i < p; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      matrix[i * p + j] = packed[element]!;
      matrix[j * p + i] = packed[element]!;
      element += 1;
    }
  }
  return { matrix, vector: packed.slice(element, element + p), corner: packed[element + p]! };
}
