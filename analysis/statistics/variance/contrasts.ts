/** Coefficients over cells, one array a contrast. */
export type ContrastSet = readonly Float64Array[];

/** k − 1 orthonormal contrasts of k levels (Helmert's: each level against the mean of the earlier ones). */
export function levelContrasts(k: number): Float64Array[] {
  return Array.from({ length: k - 1 }, (_, j) => {
    const length = Math.sqrt((j + 1) * (j + 2));
    return Float64Array.from({ length: k }, (_unused, i) => {
      if (i <= j) return -1 / length;
      return i === j + 1 ? (j + 1) / length : 0;
    });
  });
}

/** The one contrast of unit length that averages k levels. */
export function averageContrast(k: number): Float64Array[] {
  return [new Float64Array(k).fill(1 / Math.sqrt(k))];
}

/** Products of contrasts over the cells of two factors, the first varying slowest. */
export function crossContrasts(first: ContrastSet, second: ContrastSet): Float64Array[] {
  return first.flatMap((a) =>
    second.map((b) =>
      Float64Array.from({ length: a.length * b.length }, (_, cell) => {
        return a[Math.floor(cell / b.length)]! * b[cell % b.length]!;
      }),
    ),
  );
}
