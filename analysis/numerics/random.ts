/**
 * Seeded random numbers: xoshiro128**, its state filled by splitmix32 from the seed.
 *
 * Same seed, same numbers, on every machine. Not for secrets.
 * Source   Blackman & Vigna 2021, ACM Trans Math Softw 47:36 (xoshiro128**, period 2¹²⁸ − 1);
 *          Steele, Lea & Flood 2014, OOPSLA (the mixing of the seed; 32-bit constants from memory)
 */
export interface RandomSource {
  /** Uniform on the integers 0 … 2³² − 1. */
  bits(): number;
  /** Uniform on the integers 0 … bound − 1, without bias (Lemire 2019); bound from 1 to 2²⁰. */
  below(bound: number): number;
}

/** Random numbers of a seed: any integer from 0 to 2⁵³ − 1. */
export function seededRandom(seed: number): RandomSource {
  const mix = splitMix(seed);
  return xoshiro([mix(), mix(), mix(), mix()]);
}

/** The generator itself, from its four words of state (32 bits each, not all zero). */
export function xoshiro(state: readonly [number, number, number, number]): RandomSource {
  let [s0, s1, s2, s3] = state;
  const bits = (): number => {
    const product = Math.imul(s1, 5);
    const result = Math.imul((product << 7) | (product >>> 25), 9) >>> 0;
    const shifted = s1 << 9;
    s2 ^= s0;
    s3 ^= s1;
    s1 ^= s2;
    s0 ^= s3;
    s2 ^= shifted;
    s3 = (s3 << 11) | (s3 >>> 21);
    return result;
  };
  const below = (bound: number): number => {
    for (;;) {
      const product = bits() * bound;
      const high = Math.floor(product / 4294967296);
      const low = product - high * 4294967296;
      if (low >= bound || low >= 4294967296 % bound) return high;
    }
  };
  return { bits, below };
}

function splitMix(seed: number): () => number {
  let state = ((seed >>> 0) ^ Math.imul(Math.floor(seed / 4294967296), 0x9e3779b9)) >>> 0;
  return () => {
    state = (state + 0x9e3779b9) >>> 0;
    let z = state;
    z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
    z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
    return (z ^ (z >>> 16)) >>> 0;
  };
}
