export interface Spread {
  median: number;
  p99: number;
}

/** Median and 99th percentile of some milliseconds. */
export function spread(times: readonly number[]): Spread {
  const sorted = [...times].sort((a, b) => a - b);
  const at = (share: number) => sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? NaN;
  return { median: at(0.5), p99: at(0.99) };
}

export async function timed(work: () => Promise<unknown>): Promise<number> {
  const start = performance.now();
  await work();
  return performance.now() - start;
}

/** Runs `work` so many times one after the other, after a few that are not counted. */
export async function repeated(times: number, work: () => Promise<unknown>, warmUp = 10): Promise<number[]> {
  const taken: number[] = [];
  for (let turn = 0; turn < warmUp; turn += 1) await work();
  for (let turn = 0; turn < times; turn += 1) taken.push(await timed(work));
  return taken;
}

/** Lines of aligned columns. */
export function printTable(head: readonly string[], rows: readonly (readonly string[])[]): void {
  const widths = head.map((cell, column) =>
    Math.max(cell.length, ...rows.map((row) => row[column]?.length ?? 0)),
  );
  for (const row of [head, ...rows]) {
    console.log(row.map((cell, column) => cell.padEnd(widths[column] ?? 0)).join('  '));
  }
}

export const ms = (value: number): string => `${value.toFixed(1)} ms`;
export const ratio = (value: number): string => `×${value.toFixed(2)}`;
