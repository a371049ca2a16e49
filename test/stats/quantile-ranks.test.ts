import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { quantileRanks } from "../../src/stats/index.ts";

/** q as text with its fraction of 10^places. */
const quantile = fc
  .tuple(fc.integer({ min: 1, max: 9 }), fc.nat())
  .map(([places, at]) => ({ places, part: 1 + (at % (10 ** places - 1)) }))
  .map(({ places, part }) => ({
    text: `0.${String(part).padStart(places, "0")}`,
    part: BigInt(part),
    whole: 10n ** BigInt(places),
  }));

describe("the ranks of a quantile", () => {
  // Conover 1999, Practical Nonparametric Statistics, 3.2, example 1, from memory: n = 16, upper quartile, z = 1.645:
  // r* = 12 - 2.85 = 9.15 and s* = 12 + 2.85 = 14.85. He rounds both up, to 10 and 15; exactly, by the binomial, 9 and 15.
  it("are those of Conover's example, the lower end rounded outwards", () => {
    expect(quantileRanks(16, "0.75", 1.645)).toEqual({ at: 12, low: 9, high: 15 });
  });

  // Hyndman and Fan 1996, type 1: the inverse of the empirical distribution. R 4.2.2: quantile(1:n, q, type = 1).
  it.each([
    [10, "0.5", 5],
    [11, "0.5", 6],
    [10, "0.25", 3],
    [10, "0.9", 9],
    [1, "0.5", 1],
    [3, "0.999", 3],
    [1000, "0.999", 999],
    [1001, "0.999", 1000],
  ])("of %i units at %s is rank %i", (n, q, at) => {
    expect(quantileRanks(n, q, 0).at).toBe(at);
  });

  // 0.07 x 100 is 7.000000000000001 and 0.57 x 100 is 56.99999999999999 in doubles.
  it("come from the decimals as written, which doubles do not hold", () => {
    expect(quantileRanks(100, "0.07", 0)).toEqual({ at: 7, low: 7, high: 7 });
    expect(quantileRanks(100, "0.57", 0)).toEqual({ at: 57, low: 57, high: 57 });
    expect(quantileRanks(9_000_000_000_000_001, "0.5", 0).at).toBe(4_500_000_000_000_001);
  });

  it("stand where n q and z h are whole numbers, and step just beyond", () => {
    // n 100, q 0.5: h = 5, and 2 h = 10.
    expect(quantileRanks(100, "0.5", 2)).toEqual({ at: 50, low: 40, high: 60 });
    expect(quantileRanks(100, "0.5", 2 + 2 ** -51)).toEqual({ at: 50, low: 39, high: 61 });
    expect(quantileRanks(100, "0.50", 2 - 2 ** -52)).toEqual({ at: 50, low: 40, high: 60 });
  });

  it("are null outside 1..n", () => {
    expect(quantileRanks(100, "0.5", 9.75)).toEqual({ at: 50, low: 1, high: 99 });
    expect(quantileRanks(100, "0.5", 10)).toEqual({ at: 50, low: null, high: 100 });
    expect(quantileRanks(100, "0.5", 10.1)).toEqual({ at: 50, low: null, high: null });
    expect(quantileRanks(1, "0.5", 1)).toEqual({ at: 1, low: null, high: 1 });
    expect(quantileRanks(10, "0.05", 0)).toEqual({ at: 1, low: null, high: 1 });
  });

  // k <= n q - z h exactly when z^2 n q (1 - q) <= (n q - k)^2: whole numbers on both sides once multiplied out.
  it("are the last that lies outside z h, for any n, q and z", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 1_000_000_000 }),
        quantile,
        fc.oneof(fc.double({ min: 0, max: 40, noNaN: true }), fc.integer({ min: 0, max: 40 })),
        (n, { text, part, whole }, z) => {
          const found = quantileRanks(n, text, z);
          let [up, down] = [z, 1n];
          while (!Number.isInteger(up)) [up, down] = [up * 2, down * 2n];
          const reach = BigInt(up) ** 2n * BigInt(n) * part * (whole - part);
          const isFar = (rank: bigint) => (BigInt(n) * part - rank * whole) ** 2n * down ** 2n >= reach;
          const middle = BigInt(n) * part;
          const at = BigInt(found.at);
          expect(at * whole >= middle && (at - 1n) * whole < middle).toBe(true);
          const low = found.low === null ? 0n : BigInt(found.low);
          const high = found.high === null ? BigInt(n) + 1n : BigInt(found.high);
          if (found.low !== null) expect(low * whole <= middle && isFar(low)).toBe(true);
          expect((low + 1n) * whole > middle || !isFar(low + 1n)).toBe(true);
          if (found.high !== null) expect(high * whole >= middle && isFar(high)).toBe(true);
          expect((high - 1n) * whole < middle || !isFar(high - 1n)).toBe(true);
        },
      ),
      { numRuns: 500 },
    );
  });

  it("refuse a quantile of 0 or 1", () => {
    expect(() => quantileRanks(10, "1.0", 2)).toThrow("a quantile of 1.0");
    expect(() => quantileRanks(10, "0", 2)).toThrow("a quantile of 0");
  });
});
