import { describe, expect, it } from "vitest";
import { heterogeneity } from "../../src/stats/index.ts";
import { expectPrinted, expectWithin } from "./expect.ts";

// Colditz et al. 1994, JAMA 271, 698-702: 13 trials of the BCG vaccine, as the R package metafor has them (dat.bcg): cases
// and others among the vaccinated, cases and others among the rest.
const BCG = [
  [4, 119, 11, 128],
  [6, 300, 29, 274],
  [3, 228, 11, 209],
  [62, 13536, 248, 12619],
  [33, 5036, 47, 5761],
  [180, 1361, 372, 1079],
  [8, 2537, 10, 619],
  [505, 87886, 499, 87892],
  [29, 7470, 45, 7232],
  [17, 1699, 65, 1600],
  [186, 50448, 141, 27197],
  [5, 2493, 3, 2338],
  [27, 16886, 29, 17825],
] as const;

describe("Cochran's Q", () => {
  // metafor's documented example, rma(yi, vi, data = dat.bcg) of the log risk ratios, prints
  // Q(df = 12) = 152.2330, p-val < .0001 (Viechtbauer 2010, Journal of Statistical Software 36(3)).
  it("matches a published meta-analysis to the digits printed", () => {
    const trials = BCG.map(([a, b, c, d]) => ({
      estimate: Math.log(a / (a + b) / (c / (c + d))),
      standardError: Math.sqrt(1 / a - 1 / (a + b) + 1 / c - 1 / (c + d)),
    }));
    const found = heterogeneity(trials);
    expectPrinted(found?.q ?? null, "152.2330");
    expect(found?.df).toBe(12);
    expect(found?.p).toBeLessThan(0.0001);
  });

  // By hand: weights 1 and 4, middle (0 + 4) / 5 = 0.8, Q = 0.64 + 4 x 0.04 = 0.8; p = 2 (1 - Phi(sqrt 0.8)).
  it("of two estimates is the square of their z, on one degree", () => {
    const found = heterogeneity([
      { estimate: 0, standardError: 1 },
      { estimate: 1, standardError: 0.5 },
    ]);
    expectWithin(found?.q ?? null, 0.8, 1e-15);
    expect(found?.df).toBe(1);
    expectPrinted(found?.p ?? null, "0.3711"); // R: pchisq(0.8, 1, lower = FALSE) prints 0.3710934
  });

  it("does not see where the estimates lie, nor in which unit they are", () => {
    const of = (shift: number, factor: number) =>
      heterogeneity(
        [3, 5, 4.5, 9].map((estimate, i) => ({
          estimate: factor * (estimate + shift),
          standardError: factor * (1 + i / 4),
        })),
      )?.q ?? 0;
    expectWithin(of(100, 1), of(0, 1), 1e-12);
    expectWithin(of(0, 1e6), of(0, 1), 1e-12);
  });

  it("is 0 where all agree, and does not exist for fewer than two", () => {
    const same = { estimate: 2, standardError: 1 };
    expect(heterogeneity([same, same, same])).toEqual({ q: 0, df: 2, p: 1 });
    expect(heterogeneity([same])).toBeNull();
    expect(heterogeneity([])).toBeNull();
  });
});
