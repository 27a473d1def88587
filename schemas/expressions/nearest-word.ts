/** The word most like a misspelt one, if one is near enough to be meant (at most a third of its letters wrong). */
export function nearestWord(word: string, candidates: Iterable<string>): string | undefined {
  const limit = Math.max(1, Math.floor(word.length / 3));
  let best: string | undefined;
  let least = limit + 1;
  for (const candidate of candidates) {
    if (Math.abs(candidate.length - word.length) > limit) continue;
    const distance = editDistance(word.toLowerCase(), candidate.toLowerCase());
    if (distance < least) [best, least] = [candidate, distance];
  }
  return best;
}

/** Letters to add, drop, change or swap with the neighbour (optimal string alignment). */
function editDistance(a: string, b: string): number {
  let beforeLast: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, column) => column);
  for (let row = 1; row <= a.length; row += 1) {
    const next = [row];
    for (let column = 1; column <= b.length; column += 1) {
      const same = a[row - 1] === b[column - 1];
      let cost = Math.min(
        (last[column] ?? 0) + 1,
        (next[column - 1] ?? 0) + 1,
        (last[column - 1] ?? 0) + (same ? 0 : 1),
      );
      const swapped = row > 1 && column > 1 && a[row - 1] === b[column - 2] && a[row - 2] === b[column - 1];
      if (swapped) cost = Math.min(cost, (beforeLast[column - 2] ?? 0) + 1);
      next.push(cost);
    }
    [beforeLast, last] = [last, next];
  }
  return last[b.length] ?? 0;
}
