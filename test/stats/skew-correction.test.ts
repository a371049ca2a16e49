import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { expansionOf } from "../../src/stats/expansion.ts";
import {
  narrowed,
  skewCorrection,
  skewCorrectionAt,
  transformed,
  untransformed,
  widened,
} from "../../src/stats/skew-correction.ts";
import { tCritical } from "../../src/stats/student-t.ts";
import { expectWithin } from "./expect.ts";
import { anyShape, shaped } from "./shapes.ts";

const Z = 1.959963984540054;
const share = fc.double({ min: 0, max: 1, noNaN: true });
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

  // The formula of the docstring, term by term, where no coefficient of it is under 0.
  it("widens the critical value by what is left of the expansion, and by the noise of an own skewness", () => {
    const kurtotic = fc.record({
      g: fc.double({ min: -1, max: 1, noNaN: true }),
      k: fc.double({ min: 9, max: 50, noNaN: true }),
    });
    const units = fc.integer({ min: 50, max: 5000 });
    fc.assert(
      fc.property(kurtotic, kurtotic, units, units, share, (c, t, nc, nt, alike) => {
        const arms = [shaped(nc, 1, c.g, c.k), shaped(nt, 1, t.g, t.k)] as const;
        const correction = skewCorrection(...arms, alike);
        const { skew: own, kurtosis: b, freedom: e } = expansionOf(...arms);
        const q = 0.6 * alike * (1 - Math.min(nc, nt) / Math.max(nc, nt));
        const g = (nc * c.g + nt * t.g) / (nc + nt);
        const a = (1 - q) * own + (q * g * (1 / nt ** 2 - 1 / nc ** 2)) / (1 / nt + 1 / nc) ** 1.5;
        expect(correction.skew).toBeCloseTo(a, 12);
        const [x, square] = [1.7, a * a * Math.min(1, 2 * q)];
        const noise = ((1 - q) * (b - 1.5 * square) * x * (2 * x * x + 1)) / 6;
        const left = (-b * x * (x * x - 3)) / 12 + (square * x * (20 * x * x - 39)) / 216 + (e * x * (x * x + 1)) / 4;
        expectWithin(widened(x, correction), x + noise + left, 1e-9);
      }),
    );
  });

  it("counts a ratio's denominator, and takes no kurtosis under the normal's for a reason to narrow", () => {
    const [c, t] = [shaped(400, 1, 2, 9, 0.5), shaped(100, 1, 2, 9, -0.25)];
    const { lean, shift } = expansionOf(c, t);
    const plainOnes = skewCorrection(shaped(400, 1, 2, 9), shaped(100, 1, 2, 9), 0);
    const correction = skewCorrection(c, t, 0);
    expectWithin(correction.square, plainOnes.square - lean, 1e-12);
    expectWithin(correction.constant, plainOnes.constant + shift - lean, 1e-12);
    const flat = skewCorrection(shaped(50, 1, 0, -1.2), shaped(50, 1, 0, -1.2), 1);
    expect(flat).toEqual(skewCorrection(shaped(50, 1, 0, 0), shaped(50, 1, 0, 0), 1));
  });

  it("turns the control's skewness for a ratio below 0: the levels are then added", () => {
    const arm = shaped(100, 1, 3, 20);
    // Two alike added: 2 g v^1.5 / sqrt(n) over (2 v)^1.5.
    expectWithin(skewCorrectionAt(-1, arm, arm, 0).skew, (2 * 3) / 10 / 2 ** 1.5, 1e-12);
    expect(skewCorrectionAt(1, arm, arm, 0)).toEqual(skewCorrection(arm, arm, 0));
  });

  it("trusts the pooled shape only for arms of unlike size that look alike", () => {
    // The small arm shows no skewness at all, the large one does.
    const skew = (n: number, alike: number) => skewCorrection(shaped(9000, 1, 20, 900), shaped(n, 1, 0, 0), alike).skew;
    expect(skew(1000, 0)).toBeLessThan(0);
    expect(skew(1000, 1)).toBeGreaterThan(0.1);
    expect(skew(9000, 1)).toBeCloseTo(skew(9000, 0), 12);
  });
});
