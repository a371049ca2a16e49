import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { nearestNumber } from "../../src/cells/index.ts";
import {
  adjusted,
  adjustedArms,
  contrast,
  isAbsent,
  level,
  meanFromPivot,
  normalCritical,
} from "../../src/stats/index.ts";
import { adjustedValues } from "./adjusted-values.ts";
import { expectWithin, present } from "./expect.ts";
import { covariateArms, type Pairs } from "./pairs.ts";
import { adjustedContrasts } from "./reference.ts";

/** Null where the arms cannot be adjusted. */
function adjustedOf(c: Pairs, t: Pairs, summary: "mean" | "proportion" = "mean") {
  const [control, variant] = covariateArms(c, t);
  const by = adjusted(control, variant);
  if (isAbsent(by)) return null;
  const [ofControl, ofVariant] = adjustedValues([c, t], control, by.theta, meanFromPivot(control, variant));
  if (ofControl === undefined || ofVariant === undefined) throw new Error("two arms are needed");
  const arms = adjustedArms(summary, { control, variant }, by.theta, { control: ofControl, variant: ofVariant });
  return { by, arms, contrast: contrast(arms.control, arms.variant, normalCritical(0.05)) };
}

function mustAdjust(c: Pairs, t: Pairs, summary: "mean" | "proportion" = "mean") {
  const found = adjustedOf(c, t, summary);
  if (found === null) throw new Error("these arms can be adjusted");
  return found;
}

describe("the arms of an adjusted contrast", () => {
  // test/reference/adjusted-contrast.R: cov(), var(), t.test() and lm() of R 4.2.2 on ChickWeight, airquality and quakes.
  it.each(adjustedContrasts())("compare as R does on $name", (example) => {
    const arm = (variant: number) =>
      example.y.flatMap((y, i) => (example.variant[i] === variant ? [[y, example.x[i] ?? null] as const] : []));
    const isShare = example.y.every((y) => y === 0 || y === 1);
    const { by, contrast: found } = mustAdjust(arm(0), arm(1), isShare ? "proportion" : "mean");
    expectWithin(by.theta, example.theta, 1e-12);
    expectWithin(by.centre, example.meanOfX, 1e-13);
    expectWithin(by.varianceReduction, example.varianceReduction, 1e-11);
    expect(found.difference.method).toBe(example.method);
    expectWithin(found.difference.estimate, example.estimate, 1e-11);
    expectWithin(found.difference.standardError, example.standardError, 1e-12);
    expectWithin(found.difference.low, example.low, 1e-11);
    expectWithin(found.difference.high, example.high, 1e-11);
    expectWithin(found.difference.p, example.p, 1e-9);
    const relative = present(found.relative);
    expectWithin(relative.estimate, example.relative, 1e-11);
    expectWithin(relative.low, example.relativeLow, 1e-10);
    expectWithin(relative.high, example.relativeHigh, 1e-10);
    for (const [figures, expected] of [
      [found.control, example.control],
      [found.variant, example.treated],
    ] as const) {
      expectWithin(figures.mean, expected.mean, 1e-12);
      expectWithin(figures.sd, expected.sd, 1e-12);
      expectWithin(figures.skewness, expected.skewness, 1e-9);
      expect(Math.abs((figures.kurtosis ?? Number.NaN) - Number(expected.kurtosis))).toBeLessThan(1e-10);
    }
    // x and y of these two are rounded to nine places, which moves the regression's slope by about as much.
    if (example.slope !== null) expectWithin(by.theta, example.slope, 1e-8);
    if (example.effect !== null) expectWithin(found.difference.estimate, example.effect, 1e-8);
  });

  // By hand: y 1 2 3 5 against 2 4 4, x 0 1 2 3 against 1 3 missing. X = 10/6 = 5/3. Control: var x = 5/3, cov = 6.5/3;
  // variant with x 1, 3, 5/3: mean 17/9, var = 28/27, cov = ((1 - 17/9)(-4/3) + (3 - 17/9)(2/3) + (5/3 - 17/9)(2/3)) / 2 = 8/9.
  // theta = (6.5/12 + 8/27) / (5/12 + 28/81) = (181/216) / (247/324) = 543/494.
  // Means: 11/4 - theta (3/2 - 5/3) = 11/4 + theta/6, 10/3 - theta (2/9); difference 7/12 - theta 7/18.
  it("take the mean of x over both arms for a missing x", () => {
    const { by, contrast: found } = mustAdjust(
      [
        [1, 0],
        [2, 1],
        [3, 2],
        [5, 3],
      ],
      [
        [2, 1],
        [4, 3],
        [4, null],
      ],
    );
    expectWithin(by.theta, 543 / 494, 1e-15);
    expectWithin(by.centre, 5 / 3, 1e-15);
    expect(by.withoutCovariate).toEqual({ control: 0, variant: 1 });
    expectWithin(found.control.mean, 11 / 4 + 543 / 494 / 6, 1e-15);
    expectWithin(found.difference.estimate, 7 / 12 - ((543 / 494) * 7) / 18, 1e-14);
  });

  const value = fc.integer({ min: -50, max: 50 });
  const pairs = fc.array(fc.tuple(value, fc.option(value, { freq: 5 })), { minLength: 2, maxLength: 12 });

  it("have the levels that the joint sums tell, from their own values", () => {
    let compared = 0;
    fc.assert(
      fc.property(pairs, pairs, (c, t) => {
        const found = adjustedOf(c, t);
        if (found === null) return;
        for (const side of ["control", "variant"] as const) {
          const [own, joint] = [present(level(found.arms[side])), found.by[side]];
          expect(Math.abs(own.value - joint.value)).toBeLessThan(1e-11);
          expect(nearestNumber(own.exact)).toBe(own.value);
          if (isAbsent(own.variance) || isAbsent(joint.variance)) continue;
          expect(Math.abs(own.variance - joint.variance)).toBeLessThan(1e-10);
          compared += 1;
        }
      }),
    );
    expect(compared).toBeGreaterThan(100);
  });

  it("show no spread where y is x but for its unit: what is left is the rounding of doubles", () => {
    const line = (xs: readonly number[]): Pairs => xs.map((x) => [0.1 * x, x]);
    const [c, t] = [line([1, 2, 7, 3]), line([4, 5, 6, 20])];
    const [control, variant] = covariateArms(c, t);
    const [ofControl, ofVariant] = adjustedValues([c, t], control, 0.1, meanFromPivot(control, variant));
    if (ofControl === undefined || ofVariant === undefined) throw new Error("two arms are needed");
    const arms = adjustedArms("mean", { control, variant }, 0.1, { control: ofControl, variant: ofVariant });
    expect([level(arms.control), level(arms.variant)].map((found) => present(found).variance)).not.toContainEqual(
      expect.any(Number),
    );
    expect(contrast(arms.control, arms.variant, 2).difference.low).toBeNull();
  });
});
