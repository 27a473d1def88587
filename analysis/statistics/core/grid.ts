/**
 * The rounding grid: decimal ties and zeros are recognised as such although 1.3 − 1.2 is not 2.3 − 2.2 in doubles.
 *
 * Formula  q = 10^(ceil(log10 M) − 15), M the largest absolute value; 1e-15 for M = 0
 * Source   analysis contract, section 4
 */
export function roundingGrid(...columns: readonly ArrayLike<number>[]): number {
  let largest = 0;
  for (const column of columns) {
    for (let i = 0; i < column.length; i += 1) largest = Math.max(largest, Math.abs(column[i]!));
  }
  if (largest === 0) return 1e-15;
  let exponent = Math.ceil(Math.log10(largest));
  if (powerOfTen(exponent - 1) >= largest) exponent -= 1;
  if (powerOfTen(exponent) < largest) exponent += 1;
  return powerOfTen(exponent - 15);
}

/** Number of grid steps, half to even as in IEEE 754. */
export function gridSteps(value: number, grid: number): number {
  const steps = value / grid;
  const low = Math.floor(steps);
  const rest = steps - low;
  if (rest !== 0.5) return rest < 0.5 ? low : low + 1;
  return low % 2 === 0 ? low : low + 1;
}

/** The value on the grid. */
export function onGrid(value: number, grid: number): number {
  return gridSteps(value, grid) * grid;
}

/** Whether all values fall on one point of the grid. */
export function isConstantOnGrid(values: ArrayLike<number>, grid: number): boolean {
  for (let i = 1; i < values.length; i += 1) {
    if (gridSteps(values[i]!, grid) !== gridSteps(values[0]!, grid)) return false;
  }
  return true;
}

/** Read from its decimal text, which is correctly rounded; Math.pow need not be. */
function powerOfTen(exponent: number): number {
  return Number(`1e${exponent}`);
}
