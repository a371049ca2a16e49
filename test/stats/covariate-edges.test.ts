import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { adjusted, balance } from "../../src/stats/index.ts";
import { expectWithin } from "./expect.ts";
import { covariateArms, type Pairs, pairsOf } from "./pairs.ts";
import { covariates } from "./reference.ts";

const adjustedOf = (control: Pairs, variant: Pairs) => adjusted(...covariateArms(control, variant));

describe("an adjusted contrast that does not exist", () => {
  const spread: Pairs = [
    [1, 2],
    [3, 5],
    [4, 9],
  ];
  it.each([
    ["without units", [], spread, "no-units"],
    ["with one unit in an arm", [[1, 2]], spread, "few-units"],
    [
      "where no unit has x",
      [
        [1, null],
        [2, null],
      ],
      [
        [3, null],
        [4, null],
      ],
      "no-covariate",
    ],
    [
      "where x is one value",
      [
        [1, 5],
        [2, 5],
      ],
      [
        [3, 5],
        [4, 5],
      ],
      "same-covariate",
    ],
    [
      "where x is one value in each arm, all the same to the digit",
      [
        [1, 0.1],
        [2, 0.1],
      ],
      [
        [3, 0.7],
        [4, 0.7],
      ],
      "same-covariate",
    ],
    [
      "where y does not vary",
      [
        [1, 5],
        [1, 6],
      ],
      [
        [3, 5],
        [3, 8],
      ],
      "zero-variance",
    ],
    [
      "where y is x",
      [
        [0.1, 0.1],
        [0.2, 0.2],
        [0.7, 0.7],
      ],
      [
        [0.3, 0.3],
        [0.9, 0.9],
      ],
      "lost-digits",
    ],
  ] as [string, Pairs, Pairs, string][])("says why: %s", (_, control, variant, absent) => {
    expect(adjustedOf(control, variant)).toEqual({ absent });
    expect(adjustedOf(variant, control)).toEqual({ absent });
  });

  const hundredths = fc.array(fc.integer({ min: -(10 ** 9), max: 10 ** 9 }), { minLength: 2, maxLength: 30 });

  it("is not made of rounding where y follows from x to the last digit", () => {
    fc.assert(
      fc.property(hundredths, hundredths, fc.integer({ min: -9, max: 9 }), (c, t, slope) => {
        fc.pre(new Set(c).size > 1 && slope !== 0);
        const line = (xs: readonly number[]): Pairs => xs.map((x) => [(slope * x + 100) / 100, x / 100]);
        expect(adjustedOf(line(c), line(t))).toEqual({ absent: "lost-digits" });
      }),
    );
  });

  it("is not made of rounding where x is one value in each arm", () => {
    fc.assert(
      fc.property(hundredths, hundredths, fc.tuple(fc.integer(), fc.integer()), (c, t, [xc, xt]) => {
        const found = adjustedOf(
          c.map((y) => [y / 100, xc / 1000]),
          t.map((y) => [y / 100, xt / 1000]),
        );
        expect(["same-covariate", "zero-variance"]).toContain("absent" in found ? found.absent : "");
      }),
    );
  });

  it("stands where x varies in one arm only, and where y does", () => {
    expect(
      adjustedOf(spread, [
        [1, 5],
        [2, 5],
      ]),
    ).not.toHaveProperty("absent");
    expect(
      adjustedOf(spread, [
        [1, 5],
        [1, 6],
      ]),
    ).not.toHaveProperty("absent");
  });

  it("refuses sums that were not taken by one measure", () => {
    const [c, t] = covariateArms(spread, [
      [2, 1],
      [6, 7],
    ]);
    expect(() => adjusted(c, { ...t, value: { ...t.value, scale: 1024 } })).toThrow("together with sums by");
    expect(() => adjusted(c, { ...t, joint: { ...t.joint, n: 1 } })).toThrow("1 pairs and 2 covariates for 2 values");
  });
});

describe("the balance of a covariate", () => {
  it.each(covariates())("agrees with R on $name", (row) => {
    const [c, t] = covariateArms(pairsOf(row.control), pairsOf(row.variant));
    const found = balance(c.covariate, t.covariate, 0.05);
    expect(Math.abs((found.difference.estimate ?? Number.NaN) - Number(row.balance.difference))).toBeLessThan(1e-12);
    expect(Math.abs((found.difference.z ?? Number.NaN) - Number(row.balance.t))).toBeLessThan(1e-11);
    expectWithin(found.difference.p, row.balance.p, 1e-11);
    expect(Math.abs((found.standardised ?? Number.NaN) - Number(row.balance.standardised))).toBeLessThan(1e-12);
  });

  it("has no standardised difference without spread, and half of it with one arm's", () => {
    const of = (c: Pairs, t: Pairs) =>
      balance(...(covariateArms(c, t).map((arm) => arm.covariate) as [never, never]), 0.05);
    expect(
      of(
        [
          [0, 5],
          [0, 5],
        ],
        [
          [0, 6],
          [0, 6],
        ],
      ),
    ).toMatchObject({ standardised: null, difference: { p: null } });
    // sd 0 and sqrt(2): 1 / sqrt((0 + 2) / 2).
    expectWithin(
      of(
        [
          [0, 5],
          [0, 5],
        ],
        [
          [0, 5],
          [0, 7],
        ],
      ).standardised,
      1,
      1e-14,
    );
    expect(
      of(
        [[0, 5]],
        [
          [0, 5],
          [0, 7],
        ],
      ).standardised,
    ).toBeNull();
    expect(of([], [[0, 5]]).standardised).toBeNull();
  });
});
