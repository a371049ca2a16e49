import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { difference } from "../../src/stats/difference.ts";
import { relative } from "../../src/stats/relative.ts";
import { tCritical } from "../../src/stats/student-t.ts";
import type { Level } from "../../src/stats/types.ts";
import { expectPrinted, expectWithin, present } from "./expect.ts";
import { levelFrom, levelOf } from "./levels.ts";
import { fromR } from "./reference.ts";

describe("Fieller's interval", () => {
  // mratios, t.test.ratio(a1, a2) after set.seed(12345), as printed at mikuhatsune.hatenadiary.com/entry/20121212/1355320912:
  // 0.4056763 to 2.6170008 for the ratio. Its quantile has 6.9382387 degrees (the ratio estimate put in); the draws are from R.
  it("matches a published example to the digits printed", () => {
    const variant = levelOf([1.585528818, 1.709466018, 0.890696685, 0.546502827, 1.605887456]);
    const control = levelOf([0.182044032, 2.630098551, 1.723815895, 1.715840256, 1.080677998]);
    const found = present(relative(control, variant, tCritical(0.05, 6.9382387)));
    expectPrinted(1 + (found.low ?? Number.NaN), "0.4056763");
    expectPrinted(1 + (found.high ?? Number.NaN), "2.6170008");
  });

  it.each(fromR().welch)("agrees with R's roots on $control against $variant", (expected) => {
    const [control, variant] = [levelOf(expected.control), levelOf(expected.variant)];
    const found = relative(control, variant, tCritical(1 - expected.confidence, Number(expected.df)));
    if (expected.relativeLow === null || expected.relativeHigh === null) {
      expect(found).toEqual({ absent: "control-near-zero" });
      return;
    }
    // R finds r and takes 1 away: an absolute error of its rounding.
    expect(Math.abs((present(found).low ?? Number.NaN) - Number(expected.relativeLow))).toBeLessThan(1e-12);
    expectWithin(present(found).high, expected.relativeHigh, 1e-10);
  });

  it("is the difference over the control where the control's mean has no variance", () => {
    const [control, variant]: Level[] = [{ ...levelFrom(10, 4, 0) }, levelFrom(10, 5, 2)] as [Level, Level];
    const found = present(relative(control as Level, variant as Level, 2));
    expectWithin(found.estimate, 0.25, 1e-15);
    expectWithin(found.low, 0.25 - (2 * 2) / Math.sqrt(10) / 4, 1e-14);
    expectWithin(found.high, 0.25 + (2 * 2) / Math.sqrt(10) / 4, 1e-14);
  });

  it("is absent when the control's mean is not clearly above 0", () => {
    const variant = levelFrom(10, 5, 1);
    expect(relative(levelFrom(4, 1, 1), variant, 2)).toEqual({ absent: "control-near-zero" });
    expect(relative(levelFrom(4, 1.000001, 1), variant, 2)).not.toHaveProperty("absent");
    expect(relative(levelFrom(4, -3, 1), variant, 2)).toEqual({ absent: "control-near-zero" });
    expect(relative(levelFrom(4, 0, 0), variant, 2)).toEqual({ absent: "control-near-zero" });
  });

  it("is absent where the difference is, for the same reason", () => {
    expect(relative(levelOf([3]), levelOf([1, 2]), 2)).toEqual({ absent: "few-units" });
    expect(relative(levelOf([3, 3]), levelOf([1, 1]), 2)).toEqual({ absent: "zero-variance" });
  });

  const level = fc
    .tuple(
      fc.integer({ min: 2, max: 1_000_000 }),
      fc.integer({ min: -1000, max: 1_000_000 }),
      fc.integer({ min: 0, max: 10_000_000 }),
    )
    .map(([n, mean, sd]) => levelFrom(n, mean / 1000, sd / 1000));

  it("excludes 0 exactly when the difference does, and holds the estimate", () => {
    fc.assert(
      fc.property(level, level, fc.double({ min: 1e-6, max: 0.9 }), (control, variant, alpha) => {
        const absolute = difference(control, variant, alpha);
        if ("absent" in absolute) return;
        const share = relative(control, variant, absolute.critical);
        if ("absent" in share) return;
        expect(Math.sign(share.low ?? Number.NaN)).toBe(Math.sign(absolute.low));
        expect(Math.sign(share.high ?? Number.NaN)).toBe(Math.sign(absolute.high));
        expect(share.low).toBeLessThanOrEqual(share.estimate + 1e-12 * Math.abs(share.estimate));
        expect(share.high).toBeGreaterThanOrEqual(share.estimate - 1e-12 * Math.abs(share.estimate));
      }),
      { numRuns: 2000 },
    );
  });

  it("ends where the ratio is just not rejected", () => {
    fc.assert(
      fc.property(level, level, fc.double({ min: 0.5, max: 4, noNaN: true }), (control, variant, q) => {
        const share = relative(control, variant, q);
        if ("absent" in share) return;
        const [vc, vt] = [control.variance as number, variant.variance as number];
        fc.pre(control.value > 1.01 * q * Math.sqrt(vc) && vt > 0);
        for (const end of [share.low, share.high]) {
          const r = 1 + (end ?? Number.NaN);
          const gap = Math.abs(variant.value - r * control.value);
          const half = q * Math.sqrt(vt + r * r * vc);
          const size = half + Math.abs(variant.value) + Math.abs(r * control.value) + control.value; // 1 + rho rounds
          expect(Math.abs(gap - half)).toBeLessThan(1e-11 * size);
        }
      }),
    );
  });
});
