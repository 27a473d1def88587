/**
 * Collects subjects whose random-effects columns have the same R (see `SubjectStatistics`).
 *
 * The caller fills `first` and `second`, the two rows of Q'[X y] of one subject, and calls `add`.
 */
export class PatternTable {
  readonly first: Float64Array;
  readonly second: Float64Array;
  readonly #width: number;
  readonly #packed: number;
  readonly #counts: Float64Array;
  readonly #r: Float64Array;
  #moments: Float64Array;
  #size = 0;
  readonly #index = new Map<number, number>();

  constructor(capacity: number, width: number) {
    this.first = new Float64Array(width);
    this.second = new Float64Array(width);
    this.#width = width;
    this.#packed = (width * (width + 1)) / 2;
    this.#counts = new Float64Array(capacity);
    this.#r = new Float64Array(3 * capacity);
    this.#moments = new Float64Array(3 * this.#packed * Math.min(capacity, 64));
  }

  add(r11: number, r12: number, r22: number): void {
    const pattern = this.#find(r11, r12, r22);
    this.#counts[pattern]! += 1;
    const { first, second } = this;
    const moments = this.#moments;
    const packed = this.#packed;
    let element = 3 * packed * pattern;
    for (let i = 0; i < this.#width; i += 1) {
      const a = first[i]!;
      const b = second[i]!;
      for (let j = 0; j <= i; j += 1) {
        moments[element]! += a * first[j]!;
        moments[element + packed]! += a * second[j]! + b * first[j]!;
        moments[element + 2 * packed]! += b * second[j]!;
        element += 1;
      }
    }
  }

  finish() {
    const size = this.#size;
    const column = (c: number) => Float64Array.from({ length: size }, (_, g) => this.#r[3 * g + c]!);
    return {
      patterns: size,
      counts: this.#counts.subarray(0, size),
      r11: column(0),
      r12: column(1),
      r22: column(2),
      moments: this.#moments.subarray(0, 3 * this.#packed * size),
    };
  }

  #find(r11: number, r12: number, r22: number): number {
    // One number stands for the three; two patterns that share it by chance are kept apart by comparing them.
    const key = r11 + 0.7548776662 * r12 + 0.5698402909 * r22;
    const r = this.#r;
    const found = this.#index.get(key);
    if (found !== undefined && r[3 * found] === r11 && r[3 * found + 1] === r12 && r[3 * found + 2] === r22) {
      return found;
    }
    const pattern = this.#size;
    this.#size += 1;
    r.set([r11, r12, r22], 3 * pattern);
    if (found === undefined) this.#index.set(key, pattern);
    if (this.#moments.length < 3 * this.#packed * this.#size) this.#grow();
    return pattern;
  }

  #grow(): void {
    const larger = new Float64Array(2 * this.#moments.length);
    larger.set(this.#moments);
    this.#moments = larger;
  }
}
