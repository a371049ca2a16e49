import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { ratioOfPairs } from "../../src/cells/pair-ratio.ts";
import {
  adjusted,
  armFigures,
  armOfLevel,
  contrast,
  contrastBy,
  isAbsent,
  level,
  relativeByEnds,
  shapedAs,
} from "../../src/stats/index.ts";
import { meanArm, ratioArm, shareArm } from "./arms.ts";
import { expectWithin, present } from "./expect.ts";
import { covariateArms } from "./pairs.ts";

const Z = 1.959963984540054; // standard normal quantile of 0.975, Abramowitz and Stegun 1964, table 26.1 to the digits there

const amount = fc.integer({ min: 0, max: 100_000 }).map((cents) => cents / 100);
const many = fc.array(amount, { minLength: 3, maxLength: 40 }).filter((values) => new Set(values).size > 1);
const pairs = fc.array(fc.tuple(amount, fc.integer({ min: 1, max: 30 })), { minLength: 3, maxLength: 40 });

describe("a ratio's arm from joint sums", () => {
  it("has the level and the variance of its units' scores, without having seen one", () => {
    fc.assert(
      fc.property(pairs, (units) => {
        const [a, b] = [units.map(([y]) => y), units.map(([, x]) => x)];
        const [{ value, joint }] = covariateArms(units, units);
        const [found, direct] = [level(ratioOfPairs(value, joint)), level(ratioArm(a, b))];
        if (isAbsent(direct) || isAbsent(direct.variance) || direct.variance === 0) return;
        expect(present(found).exact).toEqual(direct.exact);
        // Units that all have nearly one ratio leave few digits of a - R b, in doubles above all.
        const narrow = (direct.value ** 2 + 1e-9) / (direct.variance * direct.n);
        expectWithin(present(present(found).variance), direct.variance, 1e-10 + 1e-14 * narrow);
      }),
    );
  });

  it("is absent where the denominators add up to 0, and where there is no unit", () => {
    const [{ value, joint }] = covariateArms(
      [
        [3, 1],
        [2, -1],
      ],
      [
        [1, 1],
        [2, 3],
      ],
    );
    expect(level(ratioOfPairs(value, joint))).toEqual({ absent: "zero-denominator" });
    const [none] = covariateArms(
      [],
      [
        [1, 1],
        [2, 3],
      ],
    );
    expect(level(ratioOfPairs(none.value, none.joint))).toEqual({ absent: "no-units" });
  });
});

describe("an arm made from its level", () => {
  it("has that level again, to the last digits", () => {
    fc.assert(
      fc.property(pairs, pairs, (c, t) => {
        const found = adjusted(...covariateArms(c, t));
        if (isAbsent(found)) return;
        const again = level(armOfLevel("mean", found.variant));
        expect(present(again)).toMatchObject({ n: found.variant.n, exact: found.variant.exact });
        expectWithin(present(present(again).variance), present(found.variant.variance), 1e-14);
      }),
    );
  });

  it("takes the shape of another where it has none of its own, and keeps its own where it has", () => {
    fc.assert(
      fc.property(pairs, pairs, many, (c, t, like) => {
        const found = adjusted(...covariateArms(c, t));
        if (isAbsent(found)) return;
        const shape = armFigures(meanArm(like));
        if (shape.skewness === null || shape.kurtosis === null || Math.abs(shape.skewness) < 1e-6) return;
        const shaped = armFigures(shapedAs(armOfLevel("mean", found.variant), shape));
        expectWithin(shaped.skewness, shape.skewness, 1e-9);
        expect(shaped.kurtosis).toBeCloseTo(shape.kurtosis, 8);
        expectWithin(shaped.sd, armFigures(armOfLevel("mean", found.variant)).sd ?? Number.NaN, 1e-12);
      }),
    );
    const own = meanArm([1, 2, 9]);
    expect(shapedAs(own, armFigures(meanArm([1, 8, 9])))).toBe(own);
  });
});

describe("a contrast by another method", () => {
  it("is the plan's own where the method is, and else the interval that stands beside", () => {
    fc.assert(
      fc.property(many, many, (c, t) => {
        const arms = [meanArm(c), meanArm(t)] as const;
        const own = contrast(...arms, Z);
        expect(own.difference.method).toBe("welch");
        expect(contrastBy("welch", ...arms, Z)).toMatchObject({ difference: own.difference, relative: own.relative });
        const { low, high } = contrastBy("normal", ...arms, Z)?.difference ?? {};
        expect(own.beside).toEqual([{ method: "normal", low, high }]);
      }),
    );
  });

  it("is, of shares, the score interval beside the normal one, and the other way round with few events", () => {
    const [large, few] = [
      [shareArm(300, 2_000), shareArm(340, 2_000)] as const,
      [shareArm(3, 90), shareArm(9, 90)] as const,
    ];
    const own = contrast(...large, Z);
    const score = contrastBy("score", ...large, Z);
    expect(own.beside).toEqual([{ method: "score", low: score?.difference.low, high: score?.difference.high }]);
    expect(contrastBy("score", ...few, Z)).toMatchObject({ difference: contrast(...few, Z).difference });
    const { low, high } = contrastBy("normal", ...few, Z)?.difference ?? {};
    expect(contrast(...few, Z).beside).toEqual([{ method: "normal", low, high }]);
  });

  it("is none where the method is not for these arms", () => {
    expect(contrastBy("welch", shareArm(3, 9), shareArm(4, 9), Z)).toBeNull();
    expect(contrastBy("score", meanArm([1, 2]), meanArm([1, 3]), Z)).toBeNull();
    expect(contrastBy("normal", meanArm([]), meanArm([1, 3]), Z)).toBeNull();
  });
});

describe("a relative interval with a critical value for each end", () => {
  it("is Fieller's where the difference's interval is symmetric", () => {
    fc.assert(
      fc.property(many, many, (c, t) => {
        const arms = [meanArm(c), meanArm(t)] as const;
        const { difference, relative } = contrastBy("normal", ...arms, Z) ?? {};
        if (difference === undefined || relative === undefined || isAbsent(relative)) return;
        const { estimate, standardError, low, high } = difference;
        if (estimate === null || standardError === null || low === null || high === null) return;
        const found = present(relativeByEnds(...arms, { estimate, standardError, low, high }));
        expectWithin(found.low, relative.low ?? Number.NaN, 1e-7);
        expectWithin(found.high, relative.high ?? Number.NaN, 1e-7);
      }),
    );
  });

  it("holds 0 exactly when the interval of the difference does", () => {
    const arms = [meanArm([9, 10, 11, 10, 10]), meanArm([11, 12, 13, 12, 12])] as const;
    const { estimate, standardError } = contrastBy("normal", ...arms, Z)?.difference ?? {};
    if (estimate == null || standardError == null) throw new Error("no difference");
    for (const low of [-0.4, -1e-6, 1e-6, 0.4]) {
      const found = present(relativeByEnds(...arms, { estimate, standardError, low, high: estimate + 1 }));
      expect((found.low ?? Number.NaN) > 0, `low ${low}`).toBe(low > 0);
      expect(found.high).toBeGreaterThan(found.estimate);
    }
    expect(relativeByEnds(...arms, { estimate, standardError, low: estimate + 1, high: estimate + 2 })).toEqual({
      absent: "lost-digits",
    });
  });
});
