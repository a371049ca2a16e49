import { describe, expect, it } from "vitest";
import { fnv1a, generator, seedOf } from "../../src/stats/generator.ts";

const words = (next: () => number, many: number) => Array.from({ length: many }, next);
const bytes = (text: string) => [...text].map((character) => character.charCodeAt(0));

describe("the generator of the draws", () => {
  // The first ten words of the reference program xoshiro128starstar.c 1.1 from the state 1, 2, 3, 4, as the test of the
  // Rust crate rand_xoshiro quotes them.
  it("gives the words of the reference program", () => {
    expect(words(generator([1, 2, 3, 4]), 10)).toEqual([
      11520, 0, 5927040, 70819200, 2031721883, 1637235492, 1287239034, 3734860849, 3729100597, 4258142804,
    ]);
  });

  it("repeats itself from the same seed, and is not disturbed by another one", () => {
    const seed = seedOf("bootstrap", [[1n, 2n]]);
    const [first, other, again] = [generator(seed), generator([9, 8, 7, 6]), generator(seed)];
    const mixed = Array.from({ length: 100 }, () => [first(), other()][0]);
    expect(words(again, 100)).toEqual(mixed);
  });

  // Expected 1,000 in each of 64 classes; Pearson's chi-square with 63 degrees of freedom is above 120 once in 50,000.
  it("fills classes of its upper and of its lower bits evenly", () => {
    const next = generator(seedOf("bootstrap", [[20260302n]]));
    const [upper, lower] = [new Array<number>(64).fill(0), new Array<number>(64).fill(0)];
    for (const word of words(next, 64_000)) {
      upper[word >>> 26] = (upper[word >>> 26] ?? 0) + 1;
      lower[word & 63] = (lower[word & 63] ?? 0) + 1;
    }
    for (const counts of [upper, lower]) {
      expect(counts.reduce((sum, n) => sum + (n - 1000) ** 2 / 1000, 0)).toBeLessThan(120);
    }
  });
});

describe("the seed of the draws", () => {
  // IETF draft-eastlake-fnv, test vectors.
  it.each([
    ["", 0x811c9dc5],
    ["a", 0xe40c292c],
    ["foobar", 0xbf9cf968],
  ])("hashes %j as FNV-1a does", (text, hash) => {
    expect(fnv1a(bytes(text))).toBe(hash);
  });

  // Python 3: FNV-1a over f"{word}bootstrap".encode() and struct.pack("<q", value) of each number.
  it("is of the numbers as 64 bits, little end first, on every machine", () => {
    expect(seedOf("bootstrap", [[1n, 2n, 3n], [-1n]])).toEqual([3190779099, 331296018, 1694214369, 3636723120]);
  });

  it("differs by use, by any number and by the order of numbers", () => {
    const seeds = [
      seedOf("bootstrap", [[1n, 2n, 3n]]),
      seedOf("randomisation", [[1n, 2n, 3n]]),
      seedOf("bootstrap", [[1n, 2n, 4n]]),
      seedOf("bootstrap", [[2n, 1n, 3n]]),
      seedOf("bootstrap", [[-1n, 2n, 3n]]),
    ];
    expect(new Set(seeds.map(String)).size).toBe(seeds.length);
  });

  it("is the same for a number and for the bigint of it", () => {
    expect(seedOf("bootstrap", [[1, -2, 3]])).toEqual(seedOf("bootstrap", [[1n, -2n, 3n]]));
  });

  it("takes sums of more than 64 bits", () => {
    expect(seedOf("bootstrap", [[1n << 100n, 5n]])).not.toEqual(seedOf("bootstrap", [[1n << 100n, 6n]]));
  });
});
