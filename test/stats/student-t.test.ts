import { describe, expect, it } from "vitest";
import { normalCritical, tCritical, tTwoSided } from "../../src/stats/index.ts";
import { expectPrinted, expectWithin } from "./expect.ts";
import { tails } from "./reference.ts";

const rows = tails().student.filter(([, , p]) => Number(p) > 1e-300);

describe("the two-sided tail of t", () => {
  it.each(rows)("at %f on %f degrees keeps twelve digits", (t, df, p) => {
    expectWithin(tTwoSided(t, df), p, 1e-12);
    expect(tTwoSided(-t, df)).toBe(tTwoSided(t, df));
  });

  it("is 1 at 0 and 0 where a double ends", () => {
    expect(tTwoSided(0, 5)).toBe(1);
    expect(tTwoSided(1e200, 5)).toBe(0);
    expect(tTwoSided(Number.MAX_VALUE, 1.5)).toBe(0);
    expect(tTwoSided(Number.MAX_VALUE, 1)).toBeGreaterThanOrEqual(0);
  });
});

describe("the critical value of t", () => {
  it.each(rows.filter(([t]) => t >= 0.5))("reads %f on %f degrees back from its tail", (t, df, p) => {
    // Where the tail is near 1 a rounding of alpha moves t by more: 1e-12 covers t from 0.5.
    expectWithin(tCritical(Number(p), df), t, 1e-12);
  });

  // NIST/SEMATECH e-Handbook 1.3.6.7.2, upper critical values of t, columns 0.95, 0.975 and 0.995; quoted from memory.
  it.each([
    [0.1, 1, "6.314"],
    [0.05, 1, "12.706"],
    [0.05, 10, "2.228"],
    [0.01, 10, "3.169"],
    [0.05, 30, "2.042"],
    [0.05, 100, "1.984"],
    [0.01, 100, "2.626"],
  ])("of alpha %f on %i degrees is the published one", (alpha, df, printed) => {
    expectPrinted(tCritical(alpha, df), printed);
  });

  // Readers of a report at a confidence of 0.999999999 would have seen an infinite interval with arms of two units.
  // R 4.2.2: -qt(alpha / 2, df).
  it.each([
    [1e-9, 1.03, 354835341.179175],
    [1e-12, 1.25, 2928679494.05824],
    [1e-30, 3, 13016380892.0715],
  ])("is finite for alpha %f on %f degrees", (alpha, df, expected) => {
    expectWithin(tCritical(alpha, df), expected, 1e-9); // R's qt has some ten digits out here
  });

  it("nears the normal's as the degrees grow", () => {
    expectWithin(tCritical(0.05, 1e12), normalCritical(0.05), 1e-11);
  });
});
