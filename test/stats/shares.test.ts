import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { fewEvents, hasFewEvents, scoreP } from "../../src/stats/few-events.ts";
import { moverRatio } from "../../src/stats/mover.ts";
import { newcombe } from "../../src/stats/newcombe.ts";
import { normalCritical } from "../../src/stats/normal.ts";
import type { Counts } from "../../src/stats/share.ts";
import { wilson } from "../../src/stats/wilson.ts";
import { expectFinite, expectPrinted, expectWithin, present } from "./expect.ts";
import { fromR } from "./reference.ts";

const z95 = normalCritical(0.05);
const of = (successes: number, n: number): Counts => ({ successes, n });
const counts = fc
  .tuple(
    fc.oneof(fc.integer({ min: 1, max: 40 }), fc.integer({ min: 1, max: 1e9 })),
    fc.integer({ min: 0, max: 40 }),
    fc.boolean(),
  )
  .map(([n, k, few]) => of(few ? Math.min(k, n) : Math.max(0, n - k), n));

describe("Wilson's interval", () => {
  // Newcombe 1998, Statistics in Medicine 17, 857-872, table I, method 3 (score, no continuity correction); from memory.
  it.each([
    [81, 263, "0.2553", "0.3662"],
    [15, 148, "0.0624", "0.1605"],
    [0, 20, "0.0000", "0.1611"],
    [1, 29, "0.0061", "0.1718"],
  ])("of %i in %i is the published one", (successes, n, low, high) => {
    const found = wilson(of(successes, n), z95);
    expectPrinted(found.low, low);
    expectPrinted(found.high, high);
  });

  it.each(
    fromR().shares.flatMap(({ control, variant, confidence, wilsonControl, wilsonVariant }) => [
      { counts: control, confidence, limits: wilsonControl },
      { counts: variant, confidence, limits: wilsonVariant },
    ]),
  )("agrees with R on $counts at $confidence", ({ counts: [successes, n], confidence, limits }) => {
    const found = wilson(of(successes, n), normalCritical(1 - confidence));
    expectWithin(found.low, limits[0], 1e-13);
    expectWithin(found.high, limits[1], 1e-13);
  });

  it("holds the share, within 0 and 1, and mirrors when successes and failures change places", () => {
    fc.assert(
      fc.property(counts, fc.double({ min: 1e-3, max: 40, noNaN: true }), ({ successes, n }, z) => {
        const [found, mirrored] = [wilson(of(successes, n), z), wilson(of(n - successes, n), z)];
        expect(found.low).toBeGreaterThanOrEqual(0);
        expect(found.low).toBeLessThanOrEqual(found.share);
        expect(found.high).toBeLessThanOrEqual(1 + 2 ** -52);
        expectWithin(found.low + found.below, found.share, 1e-14);
        expect(mirrored.below).toBe(found.above);
      }),
    );
  });

  it("ends where the score test just does not reject", () => {
    const z = 3;
    const { low, high, share } = wilson(of(7, 23), z);
    for (const end of [low, high]) expectWithin(Math.abs(share - end) / Math.sqrt((end * (1 - end)) / 23), z, 1e-13);
  });
});

describe("Newcombe's interval of a difference", () => {
  // Newcombe 1998, Statistics in Medicine 17, 873-890, table II, method 10. (d) also stands in the tests of the R package
  // ratesci (test3.R); the others are from memory.
  it.each([
    ["a", of(56, 70), of(48, 80), "0.0524", "0.3339"],
    ["b", of(9, 10), of(3, 10), "0.1705", "0.8090"],
    ["c", of(6, 7), of(2, 7), "0.0582", "0.8062"],
    ["d", of(5, 56), of(0, 29), "-0.0381", "0.1926"],
    ["e", of(0, 10), of(0, 20), "-0.1611", "0.2775"],
    ["f", of(0, 10), of(0, 10), "-0.2775", "0.2775"],
    ["g", of(10, 10), of(0, 20), "0.6791", "1.0000"],
    ["h", of(10, 10), of(0, 10), "0.6075", "1.0000"],
  ])("matches example (%s) of his table II", (_, variant, control, low, high) => {
    const found = newcombe(control, variant, z95);
    expectPrinted(found.low, low);
    expectPrinted(found.high, high);
  });

  it.each(fromR().shares)(
    "agrees with R on $control against $variant",
    ({ control, variant, confidence, low, high }) => {
      const found = newcombe(of(...control), of(...variant), normalCritical(1 - confidence));
      expectWithin(found.low, low, 1e-12);
      expectWithin(found.high, high, 1e-12);
    },
  );

  it("turns its sign, and nothing else, when the arms change places", () => {
    fc.assert(
      fc.property(counts, counts, fc.double({ min: 0.1, max: 10, noNaN: true }), (a, b, z) => {
        const [there, back] = [newcombe(a, b, z), newcombe(b, a, z)];
        expect(back).toEqual({ low: 0 - there.high, high: 0 - there.low });
      }),
    );
  });
});

describe("the ratio of two shares from their Wilson limits", () => {
  // Fagerland and Newcombe 2013, Statistics in Medicine 32, 2823-2836, as quoted by the tests of ratesci (test3.R).
  it.each([
    [of(24, 73), of(53, 65), "0.282", "0.563"],
    [of(29, 55), of(11, 11), "0.398", "0.761"],
    [of(7, 18), of(1, 18), "1.277", "40.751"],
  ])("matches Fagerland and Newcombe on $successes of $n", (variant, control, low, high) => {
    const found = present(moverRatio(control, variant, z95));
    expectPrinted(1 + (found.low ?? Number.NaN), low);
    expectPrinted(1 + (found.high ?? Number.NaN), high);
  });

  // Donner and Zou 2012, 6 of 22 against 112 of 842, as quoted by the tests of ratesci without their rounding of the Wilson
  // limits to three places.
  it("matches the example of Donner and Zou", () => {
    const found = present(moverRatio(of(112, 842), of(6, 22), z95));
    expectPrinted(1 + (found.low ?? Number.NaN), "0.9735");
    expectPrinted(1 + (found.high ?? Number.NaN), "3.7295");
  });

  // Fagerland, Lydersen and Laake 2017, Statistical Analysis of Contingency Tables, table 4.2 (Perondi et al. 2004: 7 of 34
  // against 1 of 34), MOVER-R Wilson and Newcombe hybrid score, as printed by the tests of their package contingencytables.
  it("matches Fagerland, Lydersen and Laake on an example with few events", () => {
    const found = fewEvents(of(1, 34), of(7, 34), z95);
    expectPrinted(found.estimate, "0.1765");
    expectPrinted(found.low, "0.0189");
    expectPrinted(found.high, "0.3404");
    const ratio = present(found.relative);
    expectPrinted(1 + ratio.estimate, "7.0000");
    expectPrinted(1 + (ratio.low ?? Number.NaN), "1.1537");
    expectPrinted(1 + (ratio.high ?? Number.NaN), "41.9763");
  });

  it.each(fromR().shares)("agrees with R's roots on $control against $variant", (expected) => {
    const found = moverRatio(of(...expected.control), of(...expected.variant), normalCritical(1 - expected.confidence));
    if (expected.relativeLow === null || expected.relativeHigh === null) {
      expect(found).toEqual({ absent: "control-near-zero" });
      return;
    }
    const { low, high } = present(found);
    expect(Math.abs((low ?? Number.NaN) - Number(expected.relativeLow))).toBeLessThan(1e-12);
    expect(Math.abs((high ?? Number.NaN) - Number(expected.relativeHigh))).toBeLessThan(
      1e-11 * (1 + Number(expected.relativeHigh)),
    );
  });

  it("agrees with the closed form of Donner and Zou wherever that can be computed", () => {
    fc.assert(
      fc.property(counts, counts, fc.double({ min: 0.5, max: 4, noNaN: true }), (control, variant, z) => {
        fc.pre(control.successes > 0 && variant.successes > 0);
        const found = present(moverRatio(control, variant, z));
        const [c, t] = [wilson(control, z), wilson(variant, z)];
        const [both, lower, upper] = [
          t.share * c.share,
          c.high * (2 * c.share - c.high),
          c.low * (2 * c.share - c.low),
        ];
        const low = (both - Math.sqrt(Math.max(0, both ** 2 - lower * t.low * (2 * t.share - t.low)))) / lower;
        const high = (both + Math.sqrt(Math.max(0, both ** 2 - upper * t.high * (2 * t.share - t.high)))) / upper;
        fc.pre(Math.abs(lower) > 0.05 * c.share ** 2 && upper > 0.05 * c.share ** 2 && both > 1e-3);
        expectWithin(1 + (found.low ?? Number.NaN), low, 1e-6); // the closed form cancels
        expectWithin(1 + (found.high ?? Number.NaN), high, 1e-6);
      }),
    );
  });
});

describe("two shares with few events", () => {
  it.each(fromR().shares)("have the p of R's root on $control against $variant", ({ control, variant, p }) => {
    expectWithin(scoreP(of(...control), of(...variant)), p, 1e-10); // uniroot stops at some 14 digits of z
  });

  it("have the p at which the interval touches 0", () => {
    fc.assert(
      fc.property(counts, counts, (control, variant) => {
        const p = scoreP(control, variant);
        expect(p).toBeGreaterThanOrEqual(0);
        expect(p).toBeLessThanOrEqual(1);
        fc.pre(p > 1e-200 && p < 0.9);
        const { low, high } = newcombe(control, variant, normalCritical(p));
        const touching = Math.min(Math.abs(low), Math.abs(high));
        expect(touching).toBeLessThan(1e-12 * (high - low));
      }),
    );
  });

  it("agree about 0 in difference, ratio and p", () => {
    fc.assert(
      fc.property(counts, counts, fc.double({ min: 1e-12, max: 0.9, noNaN: true }), (control, variant, alpha) => {
        const found = fewEvents(control, variant, normalCritical(alpha));
        expectFinite(found);
        const excludes = found.low > 0 || found.high < 0;
        if (Math.abs(found.p / alpha - 1) > 1e-9) expect(found.p < alpha).toBe(excludes);
        if ("absent" in found.relative) expect(control.successes).toBe(0);
        else {
          expect(Math.sign(found.relative.low ?? Number.NaN)).toBe(Math.sign(found.low));
          expect(Math.sign(found.relative.high ?? Number.NaN)).toBe(Math.sign(found.high));
          expect(found.relative.low).toBeGreaterThanOrEqual(-1);
        }
      }),
      { numRuns: 2000 },
    );
  });

  it("have p 1 when the shares are the same, and an interval about 0", () => {
    const found = fewEvents(of(0, 30), of(0, 20), z95);
    expect(found).toMatchObject({ estimate: 0, p: 1, relative: { absent: "control-near-zero" } });
    expect(found.low).toBeLessThan(0);
    expect(found.high).toBeGreaterThan(0);
    expect(scoreP(of(3, 9), of(2, 6))).toBe(1);
  });

  it("end at -100% when no unit of the variant has the event", () => {
    const ratio = present(moverRatio(of(6, 20), of(0, 20), z95));
    expect(ratio).toMatchObject({ estimate: -1, low: -1 });
    expect(ratio.high).toBeLessThan(0);
  });

  it("are those with under 10 successes or failures", () => {
    expect([of(9, 100), of(10, 100), of(90, 100), of(91, 100), of(0, 0)].map(hasFewEvents)).toEqual([
      true,
      false,
      false,
      true,
      true,
    ]);
  });
});
