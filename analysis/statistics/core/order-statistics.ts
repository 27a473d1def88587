/**
 * The k-th smallest value (k from 1) by quickselect; reorders the array.
 *
 * Source   Hoare 1961, Comm ACM 4:321 (algorithm 65), with the middle element as pivot
 */
export function orderStatistic(values: Float64Array, k: number): number {
  let low = 0;
  let high = values.length - 1;
  const wanted = k - 1;
  while (low < high) {
    const pivot = values[(low + high) >> 1]!;
    let i = low;
    let j = high;
    while (i <= j) {
      while (values[i]! < pivot) i += 1;
      while (values[j]! > pivot) j -= 1;
      if (i > j) break;
      const kept = values[i]!;
      values[i] = values[j]!;
      values[j] = kept;
      i += 1;
      j -= 1;
    }
    if (wanted <= j) high = j;
    else if (wanted >= i) low = i;
    else break;
  }
  return values[wanted]!;
}

/** Value at a real rank (1 … length) of sorted values, linear between neighbours, held inside the range. */
export function valueAtRank(sorted: Float64Array, rank: number): number {
  const held = Math.min(Math.max(rank, 1), sorted.length);
  const below = Math.floor(held);
  const low = sorted[below - 1]!;
  return below === sorted.length ? low : low + (held - below) * (sorted[below]! - low);
}
