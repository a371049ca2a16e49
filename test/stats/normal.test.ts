import { describe, expect, it } from "vitest";
import { normalCritical, normalTwoSided, normalUpperTail } from "../../src/stats/index.ts";
import { expectPrinted, expectWithin } from "./expect.ts";
import { tails } from "./reference.ts";

// METHODS 8: relative error at most 1e-12 up to |z| = 37.
const TOLERANCE = 1e-12;

describe("the normal tail", () => {
  it.each(tails().normal)("beyond %f keeps twelve digits", (z, upper) => {
    expectWithin(normalUpperTail(z), upper, TOLERANCE);
  });

  it.each(tails().normal.filter(([z]) => z >= 0))("is the same number on both sides of 0, at %f", (z, upper) => {
    expectWithin(normalTwoSided(z), 2 * Number(upper), TOLERANCE);
    expect(normalTwoSided(-z)).toBe(normalTwoSided(z));
  });

  it("becomes 0, and nothing worse, where a double ends", () => {
    expect(normalUpperTail(40)).toBe(0);
    expect(normalTwoSided(-1e300)).toBe(0);
    expect(normalUpperTail(-1e300)).toBe(1);
    expect(normalTwoSided(Number.MAX_VALUE)).toBe(0);
  });

  // Abramowitz and Stegun 1964, table 26.1: P(1.96) = 0.97500 21048 51780, quoted from memory; this is the complement.
  it("matches the table of Abramowitz and Stegun", () => {
    expectPrinted(normalUpperTail(1.96), "0.024997895148220");
  });
});

describe("the critical value", () => {
  it.each(tails().critical)("of alpha %f has twelve digits", (alpha, z) => {
    expectWithin(normalCritical(alpha), z, TOLERANCE);
  });

  // R 4.2.2: qnorm(0.975) prints 1.959964.
  it("of 0.05 is the familiar one", () => {
    expectPrinted(normalCritical(0.05), "1.959964");
  });

  it("takes over between its two sources without a step", () => {
    const [below, above] = [normalCritical(0.001 - 1e-12), normalCritical(0.001)];
    // The slope of z in alpha at 0.001 is about -281: 1e-12 of alpha is 2.8e-10 of z, less than 3e-10.
    expect(below - above).toBeGreaterThan(2.7e-10);
    expect(below - above).toBeLessThan(2.9e-10);
  });
});
