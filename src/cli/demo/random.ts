/** A small seeded generator for the demo's invented log: the same seed gives the same log on every machine. */
export interface Random {
  /** In [0, 1), 32 bits. */
  uniform(): number;
  /** Standard normal. */
  normal(): number;
  poisson(mean: number): number;
  /** True with the given probability. */
  chance(probability: number): boolean;
  /** One of the items, drawn by their weights. */
  pick<T>(items: readonly Weighted<T>[]): T;
}

export type Weighted<T> = readonly [item: T, weight: number];

/**
 * The next 64-bit words of SplitMix64, used only to fill the state of the generator below.
 *
 * Source: Steele, Lea and Flood 2014, Fast splittable pseudorandom number generators, OOPSLA, 453-472; the constants are
 * those of the reference program splitmix64.c by S. Vigna (public domain).
 */
export function splitMix64(seed: bigint, words: number): bigint[] {
  return Array.from({ length: words }, (_, index) => {
    let z = BigInt.asUintN(64, seed + 0x9e3779b97f4a7c15n * BigInt(index + 1));
    z = BigInt.asUintN(64, (z ^ (z >> 30n)) * 0xbf58476d1ce4e5b9n);
    z = BigInt.asUintN(64, (z ^ (z >> 27n)) * 0x94d049bb133111ebn);
    return z ^ (z >> 31n);
  });
}

/**
 * xoshiro128++: unsigned 32-bit words from a state of four, not all zero.
 *
 * Source: Blackman and Vigna 2021, Scrambled linear pseudorandom number generators, ACM Transactions on Mathematical
 * Software 47, article 36; rotation and shift constants of the reference program xoshiro128plusplus.c (public domain).
 */
export function xoshiro128PlusPlus(state: readonly [number, number, number, number]): () => number {
  let [s0, s1, s2, s3] = state;
  return () => {
    const result = (rotateLeft((s0 + s3) | 0, 7) + s0) >>> 0;
    const t = s1 << 9;
    s2 ^= s0;
    s3 ^= s1;
    s1 ^= s2;
    s0 ^= s3;
    s2 ^= t;
    s3 = rotateLeft(s3, 11);
    return result;
  };
}

function rotateLeft(word: number, bits: number): number {
  return (word << bits) | (word >>> (32 - bits));
}

export function random(seed: bigint): Random {
  const [a, b] = splitMix64(seed, 2) as [bigint, bigint];
  const half = (word: bigint, shift: bigint) => Number(BigInt.asUintN(32, word >> shift));
  const next = xoshiro128PlusPlus([half(a, 0n), half(a, 32n), half(b, 0n), half(b, 32n)]);
  const uniform = () => next() / 2 ** 32;
  return {
    uniform,
    // Box and Muller 1958, Annals of Mathematical Statistics 29, 610-611; the second of the pair is not kept.
    normal: () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
    poisson: (mean) => poisson(mean, uniform),
    chance: (probability) => uniform() < probability,
    pick: (items) => pick(items, uniform()),
  };
}

/** For small means. Knuth, The Art of Computer Programming 2, section 3.4.1, algorithm Q. */
function poisson(mean: number, uniform: () => number): number {
  const floor = Math.exp(-mean);
  let count = 0;
  for (let product = uniform(); product > floor; product *= uniform()) count += 1;
  return count;
}

function pick<T>(items: readonly Weighted<T>[], uniform: number): T {
  const total = items.reduce((sum, [, weight]) => sum + weight, 0);
  let left = uniform * total;
  for (const [item, weight] of items) {
    left -= weight;
    if (left < 0) return item;
  }
  const last = items.at(-1);
  if (last === undefined) throw new Error("nothing to pick from: the list is empty");
  return last[0];
}
