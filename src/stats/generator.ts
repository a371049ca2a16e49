/** Four unsigned 32-bit words, not all zero: the state that a generator starts from. */
export type Seed = readonly [number, number, number, number];

/**
 * Fills arrays with unsigned 32-bit words, uniform, the same for the same seed on every machine: xoshiro128**.
 *
 *   word = rotl(s1 * 5, 7) * 9, then the state moves by shifts and xors; period 2^128 - 1
 * The state lives in the function that is returned: two never disturb each other. Many words at a time, for draws take
 * most of their time here.
 *
 * Source: Blackman and Vigna 2021, Scrambled linear pseudorandom number generators, ACM Transactions on Mathematical
 * Software 47, article 36; constants of the reference program xoshiro128starstar.c, version 1.1 (public domain).
 */
export function wordsOf(seed: Seed): (into: Uint32Array) => void {
  let state = seed;
  return (into) => {
    let [s0, s1, s2, s3] = state;
    for (let i = 0; i < into.length; i++) {
      into[i] = Math.imul(rotateLeft(Math.imul(s1, 5), 7), 9);
      const t = s1 << 9;
      s2 ^= s0;
      s3 ^= s1;
      s1 ^= s2;
      s0 ^= s3;
      s2 ^= t;
      s3 = rotateLeft(s3, 11);
    }
    state = [s0, s1, s2, s3];
  };
}

/** The same words one by one. */
export function generator(seed: Seed): () => number {
  const fill = wordsOf(seed);
  const held = new Uint32Array(256);
  let next = held.length;
  return () => {
    if (next === held.length) {
      fill(held);
      next = 0;
    }
    return held[next++] as number;
  };
}

/**
 * The seed of a contrast's draws: FNV-1a of what they are for and of the contrast's own whole numbers, one hash for each
 * word of the state with the word's number before the rest.
 *
 * So the draws are a function of the cells alone: any file split, order of rows or number of threads repeats them, and
 * another log or another use has others. Numbers are taken modulo 2^64, little end first.
 * @param use "bootstrap" or "randomisation": the two must not share their draws
 * @param columns whole numbers, e.g. n and the sums of both arms by bucket
 *
 * Source: Fowler, Noll and Vo, FNV-1a with 32 bits (IETF draft-eastlake-fnv).
 */
export function seedOf(use: string, columns: readonly (readonly (number | bigint)[])[]): Seed {
  const words = columns.map(littleEndian);
  const word = (index: number) => {
    const start = fnv1a(bytesOf(`${index}${use}`), FNV_START);
    return words.reduce((hash, column) => fnv1a(column, hash), start);
  };
  const [a, b, c] = [word(0), word(1), word(2)];
  // All zero is the one state from which the generator never leaves.
  return [a, b, c, word(3) || 1];
}

const FNV_START = 0x811c9dc5;
const FNV_PRIME = 0x01000193;

/** FNV-1a over some bytes, going on from a hash. By index, for it goes over all cells of a contrast. */
export function fnv1a(bytes: ArrayLike<number>, start: number = FNV_START): number {
  let hash = start;
  for (let i = 0; i < bytes.length; i++) hash = Math.imul(hash ^ (bytes[i] as number), FNV_PRIME);
  return hash >>> 0;
}

function bytesOf(text: string): number[] {
  return Array.from(text, (character) => character.charCodeAt(0) & 0xff);
}

/** The bytes of 64-bit numbers, little end first on every machine. */
function littleEndian(numbers: readonly (number | bigint)[]): Uint8Array {
  const view = new DataView(new ArrayBuffer(numbers.length * 8));
  numbers.forEach((value, i) => {
    view.setBigInt64(8 * i, BigInt(value), true);
  });
  return new Uint8Array(view.buffer);
}

function rotateLeft(word: number, bits: number): number {
  return (word << bits) | (word >>> (32 - bits));
}
