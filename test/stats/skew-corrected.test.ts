import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { isAbsent } from "../../src/stats/absent.ts";
import type { ShapedArm } from "../../src/stats/expansion.ts";
import { normalCritical } from "../../src/stats/normal.ts";
import { relative } from "../../src/stats/relative.ts";
import { skewCorrected, skewCorrectedRelative } from "../../src/stats/skew-corrected.ts";
import { narrowed, skewCorrection, transformed, untransformed, widened } from "../../src/stats/skew-correction.ts";
import { tCritical } from "../../src/stats/student-t.ts";
import { simulatedArm } from "../bench/arms.ts";
import { bernoulli, type Distribution, exponential } from "../bench/samplers.ts";
import { expectWithin, present } from "./expect.ts";
import { levelFrom } from "./levels.ts";
import { anyShape, shaped } from "./shapes.ts";

const Z = 1.959963984540054;
const share = fc.double({ min: 0, max: 1, noNaN: true });
const estimate = fc.double({ min: -100, max: 100, noNaN: true });
const plain = (n: number) => shaped(n, 1, 0, 0);

describe("the correction for skewness", () => {
  it("transforms and back, and widens and back", () => {
    fc.assert(
      fc.property(anyShape, anyShape, share, fc.double({ min: -6, max: 6, noNaN: true }), (c, t, alike, x) => {
        const correction = skewCorrection(c, t, alike);
        expect(transformed(untransformed(x, correction), correction)).toBeCloseTo(x, 6);
        expect(narrowed(widened(Math.abs(x), correction), correction)).toBeCloseTo(Math.abs(x), 9);
      }),
    );
  });

  // By hand, a = 0.3: g(2) = 2 + 0.3 * 4 / 3 + 0.09 * 8 / 27 + 0.05 = 2.4766667.
  it("is Hall's cubic", () => {
    const arm = { ...plain(1e12), skewness: 0 };
    const skewed = shaped(1e4, 1, 30, 0);
    const correction = skewCorrection({ ...arm, variance: 0 }, skewed, 0);
    expectWithin(correction.skew, 0.3, 1e-12);
    expectWithin(transformed(2, correction), 2 + 0.4 + 0.72 / 27 + 0.05, 1e-12);
  });

  it("changes nothing but the critical value for arms without skewness, and that as Welch's t does", () => {
    const correction = skewCorrection(plain(12), plain(12), 1);
    expect([correction.skew, correction.square, correction.constant]).toEqual([0, 0, 0]);
    // Welch's 22 degrees of freedom stand for our 24; what else is left is of the order 1 / 22^2.
    expect(Math.abs(widened(Z, correction) - tCritical(0.05, 22))).toBeLessThan(0.02);
  });

  it("trusts the pooled shape only for arms of unlike size that look alike", () => {
    // The small arm shows no skewness at all, the large one does.
    const skew = (n: number, alike: number) => skewCorrection(shaped(9000, 1, 20, 900), shaped(n, 1, 0, 0), alike).skew;
    expect(skew(1000, 0)).toBeLessThan(0);
    expect(skew(1000, 1)).toBeGreaterThan(0.1);
    expect(skew(9000, 1)).toBeCloseTo(skew(9000, 0), 12);
  });
});

describe("the skew-corrected interval", () => {
  it("is the mirror image when the arms change places", () => {
    fc.assert(
      fc.property(anyShape, anyShape, estimate, share, (a, b, d, alike) => {
        const [one, other] = [present(skewCorrected(a, b, d, Z, alike)), present(skewCorrected(b, a, -d, Z, alike))];
        const size = Math.abs(one.low) + Math.abs(one.high);
        expect(Math.abs(other.low + one.high)).toBeLessThan(1e-9 * size);
        expect(Math.abs(other.high + one.low)).toBeLessThan(1e-9 * size);
        expect(other.p).toBeCloseTo(one.p, 9);
      }),
    );
  });

  it("touches 0 at the alpha that p names", () => {
    fc.assert(
      fc.property(anyShape, anyShape, fc.double({ min: -6, max: 6, noNaN: true }), share, (c, t, far, alike) => {
        const d = far * Math.sqrt(c.variance + t.variance);
        const { p } = present(skewCorrected(c, t, d, Z, alike));
        fc.pre(p > 1e-12 && p < 1 - 1e-6);
        const { low, high } = present(skewCorrected(c, t, d, normalCritical(p), alike));
        expect(Math.min(Math.abs(low), Math.abs(high))).toBeLessThan(1e-6 * (high - low));
      }),
    );
  });

  it("lies inside the interval of a smaller alpha", () => {
    fc.assert(
      fc.property(anyShape, anyShape, estimate, share, (c, t, d, alike) => {
        const [inner, outer] = [1.5, 2.5].map((z) => present(skewCorrected(c, t, d, z, alike)));
        expect(outer?.low).toBeLessThan(inner?.low ?? 0);
        expect(outer?.high).toBeGreaterThan(inner?.high ?? 0);
      }),
    );
  });

  it("does not exist where neither arm varies", () => {
    const still: ShapedArm = { n: 10, variance: 0, skewness: 0, kurtosis: 0, ratio: null };
    expect(skewCorrected(still, still, 1, Z, 1)).toEqual({ absent: "zero-variance" });
  });

  // 8,000 experiments: standard error 0.17 points. By the expansion the plain interval misses 4.7 / 1.5 and 0.8 / 5.0.
  it.each([
    ["exponential units, 40 against 200", exponential, 200, 40],
    ["a share of 4%, 2,000 against 250", bernoulli(0.04), 2000, 250],
  ])("misses more evenly than the plain one: %s", (_, distribution, nc, nt) => {
    const { corrected, uncorrected } = misses(distribution, nc, nt, 8000);
    const off = (pair: readonly [number, number]) => Math.max(...pair.map((tail) => Math.abs(tail - 0.025)));
    expect(off(corrected)).toBeLessThan(0.0075);
    expect(off(uncorrected)).toBeGreaterThan(0.015);
  });
});

function misses(distribution: Distribution, nc: number, nt: number, runs: number) {
  const [ofControl, ofVariant] = [distribution.sampler([1, 2, 3, 4]), distribution.sampler([5, 6, 7, 8])];
  const counts = { corrected: [0, 0] as [number, number], uncorrected: [0, 0] as [number, number] };
  const count = (pair: [number, number], low: number, high: number) => {
    if (high < 0) pair[0] += 1 / runs;
    if (low > 0) pair[1] += 1 / runs;
  };
  for (let run = 0; run < runs; run++) {
    const [c, t] = [simulatedArm(ofControl(nc), 1), simulatedArm(ofVariant(nt), 1)];
    const half = Z * Math.sqrt(c.variance + t.variance);
    count(counts.uncorrected, t.mean - c.mean - half, t.mean - c.mean + half);
    const found = skewCorrected(c, t, t.mean - c.mean, Z, 1);
    if (!isAbsent(found)) count(counts.corrected, found.low, found.high);
  }
  return counts;
}

describe("the skew-corrected relative interval", () => {
  const levels = fc.record({
    control: fc.double({ min: 0.1, max: 50, noNaN: true }),
    far: fc.double({ min: -5, max: 5, noNaN: true }),
  });

  it("excludes 0 exactly when the difference's interval does", () => {
    fc.assert(
      fc.property(anyShape, anyShape, levels, share, (c, t, { control, far }, alike) => {
        const d = far * Math.sqrt(c.variance + t.variance);
        const of = present(skewCorrected(c, t, d, Z, alike));
        const found = skewCorrectedRelative(c, t, { control, difference: d }, Z, alike);
        if (isAbsent(found)) return;
        // A null end satisfies no inequality, and an end that the difference has on one side is there on that side.
        if (of.low > 1e-9) expect(found.low).toBeGreaterThan(0);
        if (of.high < -1e-9) expect(found.high).toBeLessThan(0);
        if (of.low < -1e-9) expect(found.low ?? -1).toBeLessThanOrEqual(0);
        if (of.high > 1e-9) expect(found.high ?? 1).toBeGreaterThanOrEqual(0);
      }),
    );
  });

  it("is Fieller's interval for many units without skewness", () => {
    const [c, t] = [levelFrom(1_000_000, 10, 3), levelFrom(2_000_000, 11, 40)];
    const arm = (n: number, sd: number) => shaped(n, sd, 0, 0);
    const found = present(skewCorrectedRelative(arm(1e6, 3), arm(2e6, 40), { control: 10, difference: 1 }, Z, 1));
    const fieller = present(relative(c, t, Z));
    expectWithin(found.low, fieller.low ?? Number.NaN, 1e-5);
    expectWithin(found.high, fieller.high ?? Number.NaN, 1e-5);
    expect(found.estimate).toBe(fieller.estimate);
  });

  it("holds the ratio at its ends: the test there is at the critical value", () => {
    fc.assert(
      fc.property(anyShape, anyShape, levels, share, (c, t, { control, far }, alike) => {
        const d = far * Math.sqrt(c.variance + t.variance);
        const found = skewCorrectedRelative(c, t, { control, difference: d }, Z, alike);
        if (isAbsent(found)) return;
        for (const end of [found.low, found.high]) {
          if (end === null) continue;
          // The whole chain again, for the control's units times 1 + end.
          const factor = 1 + end;
          fc.pre(factor > 0.01 && Math.abs(end) > 1e-6);
          const times = { ...c, variance: c.variance * factor ** 2, ratio: (c.ratio ?? 0) * factor };
          const own = present(skewCorrected(times, t, d - end * control, Z, alike));
          const near = Math.min(Math.abs(own.low), Math.abs(own.high));
          expect(near).toBeLessThan(1e-5 * (own.high - own.low));
        }
      }),
    );
  });

  it("has null for an end that is never met, and is absent where neither is or the control is not above 0", () => {
    const [c, t] = [plain(100), plain(100)];
    // The control is 1.5 standard errors above 0: from above, no ratio is ever too large.
    const found = present(skewCorrectedRelative(c, t, { control: 0.15, difference: 0.85 }, Z, 1));
    expect(found.low).not.toBeNull();
    expect(found.high).toBeNull();
    expect(skewCorrectedRelative(c, t, { control: 0.01, difference: 0 }, Z, 1)).toEqual({
      absent: "control-near-zero",
    });
    expect(skewCorrectedRelative(c, t, { control: -1, difference: 2 }, Z, 1)).toEqual({
      absent: "control-near-zero",
    });
  });
});
