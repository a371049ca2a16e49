import { describe, expect, it } from "vitest";
import { chiSquareUpperTail, fisher, independence, pearson } from "../../src/stats/index.ts";
import { expectPrinted, expectWithin } from "./expect.ts";
import { fromR, tails } from "./reference.ts";

describe("the upper tail of chi-square", () => {
  it.each(tails().chiSquare.filter(([, , p]) => Number(p) > 1e-300))(
    "at %f on %i degrees keeps twelve digits",
    (x, df, p) => {
      expectWithin(chiSquareUpperTail(x, df), p, 1e-12);
    },
  );

  // NIST/SEMATECH e-Handbook 1.3.6.7.4, upper-tail critical values; quoted from memory.
  it.each([
    [3.841, 1, 0.05],
    [10.828, 1, 0.001],
    [18.307, 10, 0.05],
    [124.342, 100, 0.05],
  ])("at the published critical value %f on %i degrees is %f", (x, df, p) => {
    expectWithin(chiSquareUpperTail(x, df), p, 5e-4); // the critical values have three places
  });
});

describe("counts against shares", () => {
  // R's documented example: chisq.test(c(89,37,30,28,2), p = c(40,20,20,15,5), rescale.p = TRUE).
  it("matches R's documented example to the digits printed", () => {
    const { chiSquare, df, p } = pearson([89, 37, 30, 28, 2], [40, 20, 20, 15, 5]);
    expectPrinted(chiSquare, "9.9901");
    expect(df).toBe(4);
    expectPrinted(p, "0.04059");
  });

  it.each(fromR().goodness)("agrees with R on $counts at $shares", ({ counts, shares, chiSquare, df, p }) => {
    const found = pearson(counts, shares);
    expectWithin(found.chiSquare, chiSquare, 1e-12);
    expect(found.df).toBe(df);
    expectWithin(found.p, p, 1e-12);
  });

  // The limits of the allocation check (METHODS 7): just passes, just cautions, just fails.
  it.each([
    [5260, 0.01, 1],
    [5261, 0.001, 0.01],
    [5335, 0, 0.001],
  ])("of 5,000 against %i lie between %f and %f", (other, above, below) => {
    const { p } = pearson([5000, other], [1, 1]);
    expect(p).toBeGreaterThanOrEqual(above);
    expect(p).toBeLessThan(below);
  });

  it("say nothing when there is nothing to compare", () => {
    expect(pearson([0, 0], [1, 1])).toEqual({ chiSquare: 0, df: 0, p: 1 });
    expect(pearson([7], [1])).toEqual({ chiSquare: 0, df: 0, p: 1 });
  });
});

describe("a table of counts", () => {
  // R's documented example, from Agresti 2007, p. 39: chisq.test(M).
  it("matches R's documented example to the digits printed", () => {
    const { chiSquare, df, p } = independence([
      [762, 327, 468],
      [484, 239, 477],
    ]);
    expectPrinted(chiSquare, "30.07");
    expect(df).toBe(2);
    expectPrinted(p, "2.954e-07");
  });

  it.each(fromR().independence)("agrees with R on $table", ({ table, chiSquare, df, p, smallestExpected }) => {
    const found = independence(table);
    expectWithin(found.chiSquare, chiSquare, 1e-11); // R sums in another order
    expect(found.df).toBe(df);
    expectWithin(found.p, p, 1e-11);
    expectWithin(found.smallestExpected, smallestExpected, 1e-14);
  });

  it("leaves out rows and columns that hold nothing", () => {
    const full = independence([
      [3, 9],
      [8, 2],
    ]);
    const padded = independence([
      [3, 0, 9],
      [0, 0, 0],
      [8, 0, 2],
    ]);
    expect(padded).toEqual(full);
  });

  it("says nothing when one row or column holds all, or there is no count", () => {
    expect(independence([[4, 5]])).toMatchObject({ chiSquare: 0, df: 0, p: 1 });
    expect(
      independence([
        [0, 0],
        [0, 0],
      ]),
    ).toEqual({ chiSquare: 0, df: 0, p: 1, smallestExpected: null });
    expect(independence([])).toMatchObject({ df: 0, p: 1 });
  });
});

describe("Fisher's exact test", () => {
  // R's documented example, from Agresti 1990, p. 61: fisher.test(TeaTasting), two-sided.
  it("tells tea from milk as Fisher did", () => {
    expectPrinted(fisher(3, 1, 1, 3), "0.4857");
  });
  // R's documented example, Fisher 1962, Convictions: p-value = 0.0005367.
  it("matches R's documented example to the digits printed", () => {
    expectPrinted(fisher(2, 15, 10, 3), "0.0005367");
  });
  // Fagerland, Lydersen and Laake 2017, Statistical Analysis of Contingency Tables, table 4.3 (Ritland et al. 2007: 0 of 16
  // against 15 of 72), as printed by the tests of their R package contingencytables: P = 0.06287.
  it("matches the book's example of 0 of 16 against 15 of 72", () => {
    expectPrinted(fisher(0, 16, 15, 57), "0.06287");
  });

  it.each(fromR().fisher)("agrees with R on $table", ({ table, p }) => {
    // R takes its probabilities from the saddle-point form of the binomial: nine digits with 200,000 units.
    expectWithin(fisher(...table), p, 1e-9);
  });

  it("does not care which row or column comes first", () => {
    for (const [a, b, c, d] of [
      [2, 15, 10, 3],
      [0, 5, 9, 1000],
      [700, 1300, 900, 1100],
    ] as const) {
      const p = fisher(a, b, c, d);
      expectWithin(fisher(c, d, a, b), p, 1e-13);
      expectWithin(fisher(b, a, d, c), p, 1e-13);
      expectWithin(fisher(a, c, b, d), p, 1e-13);
    }
  });

  it("is 1 without a choice, and never more or less than a probability", () => {
    expect(fisher(0, 0, 0, 0)).toBe(1);
    expect(fisher(0, 5, 0, 8)).toBe(1);
    expect(fisher(5, 5, 5, 5)).toBe(1);
    expect(fisher(0, 100_000, 100_000, 0)).toBe(0);
  });
});
