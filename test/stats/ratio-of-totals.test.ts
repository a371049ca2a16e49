import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { Arm } from "../../src/cells/types.ts";
import { armFigures, contrast, normalCritical } from "../../src/stats/index.ts";
import { ratioOfTotals } from "../../src/stats/ratio-of-totals.ts";
import { ratioArm } from "./arms.ts";
import { expectPrinted, expectWithin, present } from "./expect.ts";
import { fromR } from "./reference.ts";

const ratioOf = (a: readonly number[], b: readonly number[]) => ratioArm(a, b) as Extract<Arm, { kind: "ratio" }>;

describe("a ratio of totals", () => {
  // The city data of Cochran 1977, populations of 49 cities in 1930 over 1920, and ten of them (Davison and Hinkley 1997). In
  // R: Cochran's eq. 6.13, and the variance of the influence values by the package boot, which knows no such formula.
  it.each(fromR().ratio)(
    "has the variance of its influence values, ratio $ratio",
    ({ numerator, denominator, ratio, variance, influence }) => {
      const found = present(ratioOfTotals(ratioOf(numerator, denominator)));
      expectWithin(found.value, ratio, 1e-15);
      expectWithin(found.variance as number, influence, 1e-4); // boot differentiates numerically
      expectWithin(found.variance as number, variance, 1e-12);
    },
  );

  // Cochran 1977, Sampling Techniques, 6.2: the ratio of the 49 cities is 6262 / 5054 = 1.239.
  it("is Cochran's for his 49 cities", () => {
    const [, cities] = fromR().ratio;
    const arm = ratioOf(cities?.numerator ?? [], cities?.denominator ?? []);
    expectPrinted(present(ratioOfTotals(arm)).value, "1.239");
    expect(armFigures(arm)).toMatchObject({ units: 49, total: 6262 });
  });

  it("is a mean where every denominator is 1", () => {
    const a = [3, 1, 4, 1, 5, 9, 2, 6];
    const ones = a.map(() => 1);
    const mean = { mean: 3.875, variance: 7.553571428571429 }; // R 4.2.2: mean(c(3,1,4,1,5,9,2,6)), var(...)
    const found = present(ratioOfTotals(ratioOf(a, ones)));
    expect(found.value).toBe(mean.mean);
    expectWithin(found.variance as number, mean.variance / 8, 1e-14);
    expect(armFigures(ratioOf(a, ones))).toMatchObject({ smallest: 1, largest: 9, total: 31 });
  });

  it("does not exist without units or where the denominators add up to 0", () => {
    expect(ratioOfTotals(ratioOf([], []))).toEqual({ absent: "no-units" });
    expect(ratioOfTotals(ratioOf([1, 2], [0, 0]))).toEqual({ absent: "zero-denominator" });
    expect(ratioOfTotals(ratioOf([1, 2], [3, -3]))).toEqual({ absent: "zero-denominator" });
    expect(armFigures(ratioOf([1, 2], [0, 0]))).toEqual({
      units: 2,
      mean: null,
      sd: null,
      skewness: null,
      kurtosis: null,
      total: 3,
      smallest: null,
      largest: null,
    });
  });

  // Readers would see an interval without width: a - R b is then nothing but the rounding of a, b and R.
  it("has no spread of its own where every unit has the same ratio", () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 1, max: 1_000_000 }), { minLength: 2, maxLength: 40 }),
        fc.integer({ min: 1, max: 1_000_000 }),
        (b, per) => {
          const a = b.map((x) => (x * per) / 1_000_000);
          const arm = ratioOf(a, b);
          const { variance } = present(ratioOfTotals(arm));
          if (variance !== 0) expect(variance).toEqual({ absent: "lost-digits" });
          expect(armFigures(arm).sd).toBeNull();
          expect(contrast(arm, arm, normalCritical(0.05)).difference).toMatchObject({
            estimate: 0,
            standardError: null,
            low: null,
            p: null,
          });
        },
      ),
    );
  });

  it("keeps a spread that is real, however small beside the ratio", () => {
    const arm = ratioOf([100.000001, 99.999999, 100, 100.000002], [1, 1, 1, 1]);
    expectWithin((armFigures(arm).sd ?? 0) ** 2, 5 / 3 / 1e12, 1e-7); // by hand: deviations 0.5, -1.5, -0.5, 1.5 millionths
  });
});
