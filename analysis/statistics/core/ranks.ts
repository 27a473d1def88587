/** Mid-ranks of the values, and Σ(t³ − t) over the sizes t of their ties. */
export function midRanks(values: ArrayLike<number>): { ranks: Float64Array; tieSum: number } {
  const order = Uint32Array.from(values, (_, index) => index).sort((a, b) => values[a]! - values[b]!);
  const ranks = new Float64Array(values.length);
  let tieSum = 0;
  for (let start = 0; start < order.length;) {
    let end = start + 1;
    while (end < order.length && values[order[end]!] === values[order[start]!]) end += 1;
    const size = end - start;
    tieSum += size ** 3 - size;
    for (let i = start; i < end; i += 1) ranks[order[i]!] = (start + end + 1) / 2;
    start = end;
  }
  return { ranks, tieSum };
}
