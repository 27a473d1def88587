/** Deterministic chance for invented numbers: the same seed, the same demo (mulberry32, then Box and Muller). */
export class Chance {
  #state: number;

  constructor(seed: number) {
    this.#state = seed >>> 0;
  }

  /** Evenly between 0 and 1. */
  even(): number {
    this.#state = (this.#state + 0x6d2b79f5) >>> 0;
    let t = this.#state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4_294_967_296;
  }

  /** Around a mean with a standard deviation, within three of them. */
  around(mean: number, deviation: number): number {
    const z = Math.sqrt(-2 * Math.log(1 - this.even())) * Math.cos(2 * Math.PI * this.even());
    return mean + deviation * Math.max(-3, Math.min(3, z));
  }

  pick<T>(items: readonly T[]): T {
    return items[Math.floor(this.even() * items.length)]!;
  }
}
