import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  driftOfLooks,
  type Looks,
  lookBoundaries,
  lookCritical,
  normalCritical,
  normalQuantile,
  pOfLooks,
} from "../../src/stats/index.ts";
import { type Paths, pathsBelow, tailOf, tailWith } from "../../src/stats/look-paths.ts";
import { spentASide } from "../../src/stats/spending.ts";
import { expectPrinted, expectWithin } from "./expect.ts";
import { lookBoundariesElsewhere } from "./reference.ts";

const evenly = (looks: number) => Array.from({ length: looks }, (_, k) => (k + 1) / looks);
const ALL = (shares: readonly number[], spending: Looks["spending"]): Looks => ({ shares, spending, isLast: true });

/** The chance to reach one of the boundaries, on either side, at any look. */
function crossing(shares: readonly number[], boundaries: readonly number[]): number {
  let paths: Paths | null = null;
  let sum = 0;
  for (const [k, t] of shares.entries()) {
    const boundary = boundaries[k] ?? 0;
    sum += 2 * tailOf(paths, t, boundary);
    paths = pathsBelow(paths, t, boundary, shares[k + 1] ?? t + 1);
  }
  return sum;
}

/** The chance to reach the upper boundary at any look, where Z has the mean `drift` at the share 1. */
function shown(drift: number, shares: readonly number[], boundaries: readonly number[]): number {
  let paths: Paths | null = null;
  let sum = 0;
  for (const [k, t] of shares.entries()) {
    const boundary = boundaries[k] ?? 0;
    sum += tailWith(drift, paths, t, boundary);
    paths = pathsBelow(paths, t, boundary, shares[k + 1] ?? t + 1);
  }
  return sum;
}

/** Whether a constant printed with so many digits is the one at which the looks together have the size alpha. */
function expectConstant(printed: string, alpha: number, looks: number, exponent: number): void {
  const half = 0.5 * 10 ** -(printed.split(".")[1] ?? "").length;
  const size = (c: number) =>
    crossing(
      evenly(looks),
      evenly(looks).map((t) => c * t ** exponent),
    );
  expect(size(Number(printed) - half), `${printed} for ${looks} looks`).toBeGreaterThanOrEqual(alpha);
  expect(size(Number(printed) + half), `${printed} for ${looks} looks`).toBeLessThanOrEqual(alpha);
}

const rows = lookBoundariesElsewhere();
const finite = (boundaries: readonly string[]) =>
  boundaries.map((text, k) => ({ text, k })).filter(({ text }) => text !== "Inf");

describe("the boundaries of planned looks", () => {
  // test/reference/looks.R: rpact integrates by rules of its own; mvtnorm has no recursion over looks at all.
  it.each(rows.filter(({ type }) => type.startsWith("as")))(
    "are those of $by: $type at $shares, alpha $alpha",
    (row) => {
      const spending = row.type === "asOF" ? "obrien-fleming" : "pocock";
      const found = lookBoundaries({ shares: row.shares, spending, isLast: row.last ?? true }, row.alpha);
      // Their tolerance is one of the chance, and far out a chance of 1e-9 moves a boundary by much.
      for (const { text, k } of finite(row.boundaries))
        expect(
          Math.abs(tailOf(null, 1, found[k] ?? 0) - tailOf(null, 1, Number(text))),
          `${found[k]} against ${text}`,
        ).toBeLessThan(1e-8);
    },
  );

  // DeMets and Lan 1994, Statistics in Medicine 13, 1341-1352, the Pocock-type boundaries of five looks; from memory.
  it("are the published ones of the Pocock type to the digits printed", () => {
    const found = lookBoundaries(ALL(evenly(5), "pocock"), 0.05);
    ["2.44", "2.43", "2.41", "2.40", "2.39"].forEach((printed, k) => {
      expectPrinted(found[k] ?? null, printed);
    });
  });

  it("spend what the spending function allows, each side by itself, and no more at the end", () => {
    const shares = [0.2, 0.5, 0.7, 1];
    for (const spending of ["obrien-fleming", "pocock"] as const) {
      const boundaries = lookBoundaries(ALL(shares, spending), 0.05);
      shares.forEach((t, k) => {
        const sofar = crossing(shares.slice(0, k + 1), boundaries.slice(0, k + 1));
        expectWithin(sofar / 2, spentASide(spending, 0.05, t), 1e-11);
      });
      expectWithin(crossing(shares, boundaries), 0.05, 1e-11);
    }
  });

  it("are the normal's at a single look, and at one that takes all at once", () => {
    expectWithin(lookCritical(ALL([1], "obrien-fleming"), 0.05), normalCritical(0.05), 1e-12);
    expectWithin(lookCritical(ALL([0.4], "pocock"), 0.01), normalCritical(0.01), 1e-12);
  });

  it("are farther out the less alpha there is, at the last look never nearer than the single one's", () => {
    const gap = fc.double({ min: 0.02, max: 0.3, noNaN: true });
    const spending = fc.constantFrom("obrien-fleming" as const, "pocock" as const);
    fc.assert(
      fc.property(fc.array(gap, { minLength: 1, maxLength: 5 }), spending, fc.boolean(), (gaps, kind, isLast) => {
        const shares = gaps.map((_, k) => gaps.slice(0, k + 1).reduce((sum, one) => sum + one, 0));
        const looks = { shares, spending: kind, isLast };
        const [wide, narrow] = [lookCritical(looks, 0.01), lookCritical(looks, 0.05)];
        expect(wide).toBeGreaterThanOrEqual(narrow);
        expect(narrow).toBeGreaterThanOrEqual(normalCritical(0.05) - 1e-9);
      }),
      { numRuns: 60 },
    );
  });

  it("are no number beyond 38 standard errors: where nothing may be spent yet, nothing is shown", () => {
    expect(lookBoundaries({ shares: [0.002], spending: "obrien-fleming", isLast: false }, 0.05)).toEqual([38]);
  });
});

describe("the integral over the looks", () => {
  // Armitage, McPherson and Rowe 1969, table 2: repeated tests at 5%; the digits from memory, four of them also in gsDesign's
  // tests/testthat/test-outputs.R (2 x 0.042, 0.063, 0.097, 0.124).
  it.each([
    [1, "0.05"],
    [2, "0.083"],
    [3, "0.107"],
    [4, "0.126"],
    [5, "0.142"],
    [10, "0.193"],
    [20, "0.248"],
  ])("gives the size of %i tests at 5% as printed", (looks, printed) => {
    expectPrinted(
      crossing(
        evenly(looks),
        evenly(looks).map(() => normalCritical(0.05)),
      ),
      printed,
    );
  });

  // Jennison and Turnbull 2000, table 2.1: C_P(K, alpha), and table 2.3: C_B(K, alpha); the digits from memory, those of
  // rpact 3.3.4 in the test below.
  it.each([
    [2, 0.05, "2.178", "1.977"],
    [3, 0.05, "2.289", "2.004"],
    [4, 0.05, "2.361", "2.024"],
    [5, 0.05, "2.413", "2.040"],
    [10, 0.05, "2.555", "2.087"],
    [2, 0.01, "2.772", "2.580"],
    [5, 0.01, "2.986", "2.621"],
    [5, 0.1, "2.122", "1.751"],
  ])("gives the constants of %i looks at %f: Pocock's %s, O'Brien and Fleming's %s", (looks, alpha, pocock, obrien) => {
    expectConstant(pocock, alpha, looks, 0);
    expectConstant(obrien, alpha, looks, -0.5);
  });

  // test/reference/looks.R.
  it.each(rows.filter(({ type }) => !type.startsWith("as")))("gives rpact's constants: $type at $shares", (row) => {
    expectWithin(crossing(row.shares, row.boundaries.map(Number)), row.alpha, 1e-7);
  });

  // Jennison and Turnbull 2000, tables 2.9 and 2.10 (Wang and Tsiatis 1987, at the last look), as in gsDesign's
  // tests/testthat/test-outputs.R; and the O'Brien-Fleming bounds of four looks of the presentation that it names.
  it("gives the published constants of Wang and Tsiatis, and four published bounds", () => {
    expectConstant("2.113", 0.05, 9, 0.1 - 0.5);
    expectConstant("2.154", 0.05, 6, 0.25 - 0.5);
    expectConstant("2.313", 0.05, 7, 0.4 - 0.5);
    const four = Number(rows.find(({ type, alpha }) => type === "OF" && alpha === 0.05)?.boundaries.at(-1));
    expect(four).toBeCloseTo(2.04, 3);
    for (const [k, printed] of ["4.05", "2.86", "2.34", "2.02"].entries())
      expectPrinted(2.024 / Math.sqrt((k + 1) / 4), printed);
  });
});

describe("p adjusted for the looks", () => {
  it("is the alpha at which the interval of this look touches 0", () => {
    for (const spending of ["obrien-fleming", "pocock"] as const) {
      for (const isLast of [false, true]) {
        const looks = { shares: [0.25, 0.5, 0.8], spending, isLast };
        for (const alpha of [1e-6, 0.001, 0.05, 0.4]) {
          const p = 2 * tailOf(null, 1, lookCritical(looks, alpha));
          expectWithin(pOfLooks(looks, p), alpha, 1e-7);
        }
      }
    }
  });

  it("is p itself at a single look, never below p, and ends at 0 and 1", () => {
    expectWithin(pOfLooks(ALL([1], "pocock"), 0.03), 0.03, 1e-9);
    const looks = { shares: [0.3, 0.6], spending: "obrien-fleming" as const, isLast: false };
    for (const p of [1e-9, 0.01, 0.2]) expect(pOfLooks(looks, p)).toBeGreaterThan(p);
    expect(pOfLooks(looks, 0)).toBe(0);
    expect(pOfLooks(looks, 1)).toBe(1);
    expect(pOfLooks(looks, 0.9999)).toBe(1);
  });
});

describe("what planned looks cost", () => {
  // rpact 3.3.4: getDesignCharacteristics(getDesignGroupSequential(kMax = k, alpha = 0.05, beta = 1 - p, sided = 2,
  // typeOfDesign = "asOF" or "asP", tolerance = 1e-10))$shift, the square of the drift
  it.each([
    ["obrien-fleming", 2, 0.8, "7.87811701"],
    ["obrien-fleming", 2, 0.9, "10.5433367"],
    ["obrien-fleming", 5, 0.8, "8.04290308"],
    ["obrien-fleming", 5, 0.9, "10.7499168"],
    ["pocock", 2, 0.8, "8.8107617"],
    ["pocock", 2, 0.9, "11.6742365"],
    ["pocock", 5, 0.8, "9.51775521"],
    ["pocock", 5, 0.9, "12.5285012"],
  ] as const)("is rpact's, for %s, %i looks and a power of %f", (spending, looks, power, shift) => {
    expectWithin(driftOfLooks(ALL(evenly(looks), spending), 0.05, power) ** 2, shift, 1e-8);
  });

  // Jennison and Turnbull 2000, R_B (table 2.8), R_P and R_WT: the size over that of a single look, 5% two-sided, as in
  // gsDesign's tests/testthat/test-outputs.R; the constants there or in the tables above.
  it.each([
    ["O'Brien and Fleming", 5, 2.040073175, -0.5, 0.8, "1.028"],
    ["Pocock", 4, 2.361298, 0, 0.8, "1.202"],
    ["Wang and Tsiatis", 9, 2.113, -0.4, 0.9, "1.048"],
    ["Wang and Tsiatis", 6, 2.154, -0.25, 0.8, "1.077"],
    ["Wang and Tsiatis", 7, 2.313, -0.1, 0.8, "1.159"],
  ])("is the published inflation of %s: %i looks", (_, looks, constant, exponent, power, printed) => {
    const [shares, single] = [evenly(looks), normalCritical(0.05) + normalQuantile(power)];
    const boundaries = shares.map((t) => constant * t ** exponent);
    const chance = (inflation: number) => shown(single * Math.sqrt(inflation), shares, boundaries);
    expect(chance(Number(printed) - 0.0005)).toBeLessThanOrEqual(power);
    expect(chance(Number(printed) + 0.0006)).toBeGreaterThanOrEqual(power); // constants with three places move it by 0.0001
  });

  it("is nothing for a single look, and grows with the looks", () => {
    const single = normalCritical(0.05) + normalQuantile(0.8);
    expectWithin(driftOfLooks(ALL([1], "pocock"), 0.05, 0.8), single, 1e-9);
    const drifts = [1, 2, 3, 6, 10].map((looks) => driftOfLooks(ALL(evenly(looks), "pocock"), 0.05, 0.8));
    expect(drifts).toEqual([...drifts].sort((a, b) => a - b));
  });
});
