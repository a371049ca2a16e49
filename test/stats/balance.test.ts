import { describe, expect, it } from "vitest";
import { balance, standardisedShares } from "../../src/stats/index.ts";
import { sumsTogether } from "./arms.ts";
import { present } from "./expect.ts";

/** Uniform on (0, 1) by the fractional parts of multiples of an irrational, started anew by `from`. */
const uniform = (n: number, from: number) =>
  Array.from({ length: n }, (_, i) => (0.5 + (i + 1 + from) * 0.6180339887498949) % 1);

const exponential = (n: number, from: number) => uniform(n, from).map((u) => Math.round(-Math.log(u) * 1e6) / 1e6);

function balanceOf(control: readonly number[], variant: readonly number[]) {
  const [c, t] = sumsTogether([control, variant]);
  if (c === undefined || t === undefined) throw new Error("two arms are needed");
  return balance(c, t, 0.05);
}

describe("the balance of a skewed covariate", () => {
  const many = exponential(9_000, 0);
  const few = exponential(300, 77_777);

  it("is doubted by the larger p where the arms are of different size", () => {
    // A small sample without its largest units has a low mean and a small spread at once: far below is not so rare
    // (METHODS 3: exponential units, 50 against 200, 4.6% where 2.5% are meant).
    const found = balanceOf(
      many,
      few.map((x) => x * 0.75),
    );
    const plain = found.difference.p ?? Number.NaN;
    expect(plain).toBeLessThan(0.01);
    expect(present(found.p ?? { absent: "no-units" })).toBeGreaterThan(plain * 1.2);
  });

  it("is not less doubted for a tail that is shorter than the normal curve's", () => {
    const found = balanceOf(
      many,
      few.map((x) => x * 1.3),
    );
    expect(found.p).toBe(found.difference.p);
  });

  it("is judged by the plain p with arms of one size, and without skewness", () => {
    const equal = balanceOf(many.slice(0, 300), few);
    expect(equal.p).toBe(equal.difference.p);
    const flat = balanceOf(uniform(9_000, 5), uniform(300, 3));
    expect(flat.p).toBe(flat.difference.p);
  });

  it("has no p without spread", () => {
    expect(balanceOf([1, 1, 1], [1, 1]).p).toBeNull();
  });
});

describe("the standardised difference of shares", () => {
  it("is that of the values, each 0 or 1", () => {
    const ones = (units: number, of: number) => Array.from({ length: of }, (_, i) => (i < units ? 1 : 0));
    for (const [c, t] of [
      [3, 9],
      [12, 2],
      [0, 4],
    ] as const) {
      const found = standardisedShares({ units: c, of: 12 }, { units: t, of: 10 });
      expect(found).toBeCloseTo(balanceOf(ones(c, 12), ones(t, 10)).standardised ?? Number.NaN, 12);
    }
  });

  it("does not exist without two units in each arm, or where nothing varies", () => {
    expect(standardisedShares({ units: 1, of: 1 }, { units: 3, of: 9 })).toBeNull();
    expect(standardisedShares({ units: 0, of: 0 }, { units: 3, of: 9 })).toBeNull();
    expect(standardisedShares({ units: 5, of: 5 }, { units: 9, of: 9 })).toBeNull();
  });
});
