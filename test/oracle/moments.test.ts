import { describe, expect, it } from "vitest";
import { quantile } from "../oracle/metrics.ts";
import { momentsOf, quotient, scoresOf } from "../oracle/moments.ts";

describe("moments by definition", () => {
  // By hand: mean 5, deviations -3 -1 -1 -1 0 0 2 4; m2 = 32/8 = 4, m3 = 42/8, m4 = 356/8.
  it("are those of eight small numbers worked out by hand", () => {
    const moments = momentsOf([2n, 4n, 4n, 4n, 5n, 5n, 7n, 9n], 1n);
    expect(moments).toEqual({ n: 8, mean: 5, variance: 32 / 7, g1: 5.25 / 8, g2: 44.5 / 16 - 3 });
  });
  it("keep their shape on another scale and far from 0", () => {
    const moments = momentsOf(
      [2n, 4n, 4n, 4n, 5n, 5n, 7n, 9n].map((x) => x + 10n ** 27n),
      10n ** 9n,
    );
    expect(moments).toEqual({ n: 8, mean: 1e18, variance: (32 / 7) * 1e-18, g1: 0.65625, g2: 44.5 / 16 - 3 });
  });
  it("have no variance for one value and no shape for equal ones", () => {
    expect(momentsOf([7n], 1n)).toEqual({ n: 1, mean: 7, variance: null, g1: null, g2: null });
    expect(momentsOf([7n, 7n], 1n)).toEqual({ n: 2, mean: 7, variance: 0, g1: null, g2: null });
    expect(momentsOf([], 1n)).toBeNull();
  });
});

describe("a ratio's scores", () => {
  // By hand: a 1, 5 over b 1, 2: R = 2, mean b = 1.5; (1 - 2) / 1.5 + 2 = 4/3, (5 - 4) / 1.5 + 2 = 8/3.
  it("average to the ratio", () => {
    const scores = scoresOf([
      { of: 1n, per: 1n },
      { of: 5n, per: 2n },
    ]);
    const values = scores?.values.map((value) => quotient(value, scores.one));
    expect(values).toEqual([4 / 3, 8 / 3]);
  });
  it("do not exist where the denominators sum to 0", () => {
    expect(scoresOf([{ of: 1n, per: 0n }])).toBeNull();
  });
});

describe("the type-1 quantile", () => {
  const tens = [50n, 20n, 40n, 10n, 30n];
  it("is the ceil(n q)-th smallest", () => {
    expect(["0.2", "0.21", "0.4", "0.6", "0.999", "1"].map((q) => quantile(tens, q))).toEqual([
      10n,
      20n,
      20n,
      30n,
      50n,
      50n,
    ]);
  });
  // In floats 0.07 x 100 is 7.000000000000001, whose ceiling is 8.
  it("takes n q in exact decimals", () => {
    const hundred = Array.from({ length: 100 }, (_, at) => BigInt(at + 1));
    expect(quantile(hundred, "0.07")).toBe(7n);
  });
});
