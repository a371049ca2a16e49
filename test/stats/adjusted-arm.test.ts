import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { nearestNumber } from "../../src/cells/index.ts";
import { adjustedArm, adjustment, contrast, normalCritical } from "../../src/stats/index.ts";
import { adjustedValues, covariateArms, type Pair } from "./covariates.ts";
import { expectFinite, expectWithin, present } from "./expect.ts";
import { covariates } from "./reference.ts";

/** Control first. */
function adjustedContrast(
  groups: readonly [readonly Pair[], readonly Pair[]],
  summary: "mean" | "proportion" = "mean",
) {
  const [control, variant] = covariateArms(groups);
  if (control === undefined || variant === undefined) throw new Error("two arms are needed");
  const by = present(adjustment(control, variant));
  const [c, t] = adjustedValues(groups, control, by);
  if (c === undefined || t === undefined) throw new Error("two arms are needed");
  return {
    by,
    ...contrast(adjustedArm(summary, control, by, c), adjustedArm(summary, variant, by, t), normalCritical(0.05)),
  };
}

const absent = (groups: readonly [readonly Pair[], readonly Pair[]]) => {
  const [control, variant] = covariateArms(groups);
  if (control === undefined || variant === undefined) throw new Error("two arms are needed");
  return adjustment(control, variant);
};

describe("an adjusted contrast", () => {
  // test/reference/covariate.R: cov(), var(), t.test() and lm() of R 4.2.2 on its data sets ChickWeight, airquality, quakes.
  it.each(covariates())("is R's on $name", (example) => {
    const arm = (variant: number) =>
      example.y.flatMap((y, i): Pair[] => (example.variant[i] === variant ? [[y, example.x[i] ?? null]] : []));
    const isShare = example.y.every((y) => y === 0 || y === 1);
    const found = adjustedContrast([arm(0), arm(1)], isShare ? "proportion" : "mean");
    expectWithin(found.by.theta, example.theta, 1e-12);
    expectWithin(nearestNumber(found.by.meanOfX), example.meanOfX, 1e-13);
    expectWithin(found.by.varianceReduction, example.varianceReduction, 1e-11);
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
    if (example.slope !== null) expectWithin(found.by.theta, example.slope, 1e-8);
    if (example.effect !== null) expectWithin(found.difference.estimate, example.effect, 1e-8);
  });

  // By hand: y 1 2 3 5 against 2 4 4, x 0 1 2 3 against 1 3 missing. X = 10/6 = 5/3. Control: var x = 5/3, cov = 6.5/3;
  // variant with x 1, 3, 5/3: mean 17/9, var = 28/27, cov = ((1 - 17/9)(-4/3) + (3 - 17/9)(2/3) + (5/3 - 17/9)(2/3)) / 2 = 8/9.
  // theta = (6.5/12 + 8/27) / (5/12 + 28/81) = (181/216) / (247/324) = 543/494.
  // Means: 11/4 - theta (3/2 - 5/3) = 11/4 + theta/6, 10/3 - theta (2/9); difference 7/12 - theta 7/18.
  it("takes the mean of x over both arms for a missing x", () => {
    const found = adjustedContrast([
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
    ]);
    expectWithin(found.by.theta, 543 / 494, 1e-15);
    expectWithin(nearestNumber(found.by.meanOfX), 5 / 3, 1e-15);
    expect(found.by.missing).toEqual({ control: 0, variant: 1 });
    expectWithin(found.control.mean, 11 / 4 + 543 / 494 / 6, 1e-15);
    expectWithin(found.difference.estimate, 7 / 12 - ((543 / 494) * 7) / 18, 1e-15);
  });

  const value = fc.integer({ min: -50, max: 50 });
  const pairs = fc.array(fc.tuple(value, fc.option(value, { freq: 5 })), { minLength: 2, maxLength: 12 });
  const two = fc.tuple(pairs, pairs);

  it("has no smaller variance with any other slope", () => {
    fc.assert(
      fc.property(two, fc.double({ min: -3, max: 3, noNaN: true }), (groups, off) => {
        const [control, variant] = covariateArms(groups);
        if (control === undefined || variant === undefined) return;
        const by = adjustment(control, variant);
        if ("absent" in by) return;
        const variance = (theta: number) =>
          groups.reduce((sum, pairs) => sum + varianceOfMean(pairs, theta, nearestNumber(by.meanOfX)), 0);
        expect(variance(by.theta)).toBeLessThanOrEqual(variance(by.theta + off) * (1 + 1e-12) + 1e-12);
        expectWithin(1 - (by.varianceReduction ?? 1), variance(0) === 0 ? 0 : variance(by.theta) / variance(0), 1e-9);
      }),
    );
  });

  it("turns its sign, and nothing else, when the arms change places", () => {
    fc.assert(
      fc.property(two, ([a, b]) => {
        const [there, back] = [absent([a, b]), absent([b, a])];
        if ("absent" in there || "absent" in back) expect(there).toEqual(back);
        else expect([there.theta, there.varianceReduction]).toEqual([back.theta, back.varianceReduction]);
      }),
    );
  });

  it("is the same wherever x is measured from, and however far", () => {
    fc.assert(
      fc.property(two, fc.constantFrom(1e6, -1e9, 1e12), ([a, b], far) => {
        const moved = (group: readonly Pair[]) => group.map(([y, x]): Pair => [y, x === null ? null : x + far]);
        const [near, off] = [absent([a, b]), absent([moved(a), moved(b)])];
        if ("absent" in near || "absent" in off) expect(near).toEqual(off);
        else expectWithin(off.theta, near.theta, 1e-9);
      }),
    );
  });

  it("says why there is none", () => {
    const y: readonly Pair[] = [
      [1, 7],
      [3, 7],
    ];
    const without: readonly Pair[] = [
      [1, null],
      [2, null],
    ];
    expect(absent([y, []])).toEqual({ absent: "no-units" });
    expect(absent([y, [[2, 1]]])).toEqual({ absent: "few-units" });
    expect(absent([without, without])).toEqual({ absent: "no-covariate" });
    expect(absent([y, y])).toEqual({ absent: "same-covariate" });
    expect(absent([without, y])).toEqual({ absent: "same-covariate" });
    const far: readonly Pair[] = [
      [1, 1e17],
      [2, 2e-9],
      [4, 1e-9],
    ];
    expect(absent([far, y])).not.toHaveProperty("absent");
    const third = 0.333333333;
    expect(
      absent([
        [
          [1, third],
          [2, third],
        ],
        [
          [1, third],
          [5, third],
        ],
      ]),
    ).toEqual({ absent: "same-covariate" });
  });

  it("tells 0 saved where x says nothing about y, and all where it says everything", () => {
    const nothing = adjustedContrast([
      [
        [1, 0],
        [1, 2],
        [3, 0],
        [3, 2],
      ],
      [
        [1, 0],
        [1, 2],
        [2, 0],
        [2, 2],
      ],
    ]);
    expect(nothing.by.theta).toBe(0);
    expect(nothing.by.varianceReduction).toBe(0);
    const all = adjustedContrast([
      [
        [1, 1],
        [2, 2],
        [3, 3],
      ],
      [
        [4, 1],
        [5, 2],
        [7, 4],
      ],
    ]);
    expectWithin(all.by.varianceReduction, 1, 1e-14);
    // What is left of the spread is rounding alone: no interval may be made of it.
    expectWithin(all.difference.estimate, 3, 1e-14);
    expect(all.difference.low).toBeNull();
    expectFinite(all.difference.estimate);
  });
});

/** v of one arm's mean of y - theta (x - X), a missing x being X. */
function varianceOfMean(pairs: readonly Pair[], theta: number, meanOfX: number): number {
  const values = pairs.map(([y, x]) => y - theta * (x === null ? 0 : x - meanOfX));
  const mean = values.reduce((a, b) => a + b, 0) / values.length;
  return values.reduce((sum, d) => sum + (d - mean) ** 2, 0) / (values.length - 1) / values.length;
}
