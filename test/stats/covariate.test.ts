import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { difference } from "../../src/stats/difference.ts";
import { type Adjusted, adjusted } from "../../src/stats/index.ts";
import { welch } from "../../src/stats/welch.ts";
import { expectFinite, expectWithin, present } from "./expect.ts";
import { covariateArms, type Pairs, pairsOf } from "./pairs.ts";
import { covariates } from "./reference.ts";

const adjustedOf = (control: Pairs, variant: Pairs) => adjusted(...covariateArms(control, variant));

describe("an adjusted contrast", () => {
  it.each(covariates())("agrees with R on $name", (row) => {
    const found = present(adjustedOf(pairsOf(row.control), pairsOf(row.variant)));
    expectWithin(found.theta, row.theta, 1e-13);
    expectWithin(found.centre, row.centre, 1e-14);
    expectWithin(found.control.value, row.levelControl, 1e-13);
    expectWithin(found.variant.value, row.levelVariant, 1e-13);
    expectWithin(found.varianceReduction, row.varianceReduction, 1e-12);
    const interval = present(welch(found.control, found.variant, 0.05));
    expectWithin(interval.standardError, row.standardError, 1e-13);
    expectWithin(interval.z, row.t, 1e-12);
    expectWithin(interval.df, row.df, 1e-12);
  });

  // iris, setosa and versicolor, 50 flowers each; ToothGrowth, 30 animals each.
  it("has the slope and the difference of the regression on arm and x with arms of one size", () => {
    for (const row of covariates().slice(0, 2)) {
      expect(row.control.y).toHaveLength(row.variant.y.length);
      const found = present(adjustedOf(pairsOf(row.control), pairsOf(row.variant)));
      expectWithin(found.theta, row.regression.slope, 1e-13);
      expectWithin(present(difference(found.control, found.variant, 0.05)).estimate, row.regression.difference, 1e-12);
    }
  });

  // ToothGrowth has the same doses in both arms: Lin 2013 with a slope of its own in each arm gives the same difference.
  it("has the difference of the interacted regression where x has one variance in both arms", () => {
    const [, row] = covariates();
    if (row === undefined) throw new Error("no second row");
    const found = present(adjustedOf(pairsOf(row.control), pairsOf(row.variant)));
    expectWithin(present(difference(found.control, found.variant, 0.05)).estimate, row.interacted, 1e-12);
  });

  // y = 3 + 2 x + arm, so that any regression has the slope 2, and the rest is the noise of +-1 alone.
  it("has the regression's slope where the slopes are equal, whatever the sizes of the arms", () => {
    const control: Pairs = [0, 1, 2, 3, 4, 5, 6, 7].map((x) => [3 + 2 * x + (x % 4 === 0 || x % 4 === 3 ? 1 : -1), x]);
    const variant: Pairs = [2, 3, 4, 5].map((x) => [8 + 2 * x + (x % 4 === 0 || x % 4 === 3 ? 1 : -1), x]);
    const found = present(adjustedOf(control, variant));
    expect(found.theta).toBeCloseTo(2, 14);
    expectWithin(present(difference(found.control, found.variant, 0.05)).estimate, 5, 1e-13);
  });

  const whole = fc.integer({ min: -1000, max: 1000 });
  const unit = fc.tuple(whole, fc.option(whole, { freq: 8 }));
  const arm = fc.array(unit, { minLength: 2, maxLength: 30 });

  it("has the smallest variance that any slope gives, and never more than without", () => {
    fc.assert(
      fc.property(arm, arm, fc.double({ min: -0.5, max: 0.5, noNaN: true }), (control, variant, off) => {
        const found = adjustedOf(control, variant);
        if ("absent" in found) return;
        expectFinite({ ...found, control: found.control.value, variant: found.variant.value });
        expect(found.varianceReduction).toBeGreaterThanOrEqual(0);
        expect(found.varianceReduction).toBeLessThan(1);
        const variance = (slope: number) =>
          [control, variant].reduce((sum, units) => {
            const values = units.map(([y, x]) => y - slope * ((x ?? found.centre) - found.centre));
            return sum + varianceOf(values) / values.length;
          }, 0);
        const least = variance(found.theta);
        expectWithin((found.control.variance as number) + (found.variant.variance as number), least, 1e-9);
        expectWithin(
          found.varianceReduction,
          1 - least / variance(0),
          1e-9 + 1e-9 / (found.varianceReduction + 1e-300),
        );
        expect(variance(found.theta + off)).toBeGreaterThanOrEqual(least * (1 - 1e-9));
      }),
      { numRuns: 500 },
    );
  });

  it("does not change when x moves, and turns its slope with the unit of x", () => {
    fc.assert(
      fc.property(
        arm,
        arm,
        fc.integer({ min: -1e6, max: 1e6 }),
        fc.constantFrom(-1, 2, 1024, 0.5),
        (c, t, by, times) => {
          const changed = (units: Pairs): Pairs => units.map(([y, x]) => [y, x === null ? null : x * times + by]);
          const [plain, other] = [adjustedOf(c, t), adjustedOf(changed(c), changed(t))];
          if ("absent" in plain || "absent" in other) {
            expect(other).toEqual(plain);
            return;
          }
          expect(Math.abs(other.theta * times - plain.theta)).toBeLessThan(1e-10 * (1 + Math.abs(plain.theta)));
          for (const side of ["control", "variant"] as const) {
            expect(Math.abs(other[side].value - plain[side].value)).toBeLessThan(1e-9);
            expectWithin(other[side].variance as number, plain[side].variance as number, 1e-7);
          }
        },
      ),
    );
  });

  it("moves with y, and turns round when the arms change places", () => {
    fc.assert(
      fc.property(arm, arm, (c, t) => {
        const [plain, back] = [adjustedOf(c, t), adjustedOf(t, c)];
        if ("absent" in plain || "absent" in back) {
          expect(back).toEqual(plain);
          return;
        }
        const turned: Adjusted = { ...back, control: back.variant, variant: back.control };
        expect(turned.theta).toBe(plain.theta);
        expect([turned.control.value, turned.variant.value]).toEqual([plain.control.value, plain.variant.value]);
        const moved = present(adjustedOf(shift(c), shift(t)));
        expect(Math.abs(moved.theta - plain.theta)).toBeLessThan(1e-10 * (1 + Math.abs(plain.theta)));
        expect(Math.abs(moved.variant.value - plain.variant.value - 5)).toBeLessThan(1e-9);
      }),
    );
  });

  it("keeps the level of y over both arms", () => {
    const control: Pairs = [
      [1, 2],
      [3, 5],
      [4, 9],
    ];
    const variant: Pairs = [
      [2, 1],
      [6, 7],
    ];
    const found = present(adjustedOf(control, variant));
    expectWithin((3 * found.control.value + 2 * found.variant.value) / 5, (1 + 3 + 4 + 2 + 6) / 5, 1e-14);
  });

  it("counts the units without x, which pull nowhere", () => {
    const [c, t]: [Pairs, Pairs] = [
      [
        [1, 2],
        [3, 5],
        [4, null],
      ],
      [
        [2, 1],
        [6, 7],
        [9, null],
        [3, 3],
      ],
    ];
    const found = present(adjustedOf(c, t));
    expect(found.withoutCovariate).toEqual({ control: 1, variant: 1 });
    const centre = (2 + 5 + 1 + 7 + 3) / 5;
    expect(found.centre).toBe(centre);
    const filled = (units: Pairs): Pairs => units.map(([y, x]) => [y, x ?? centre]);
    const same = present(adjustedOf(filled(c), filled(t)));
    expectWithin(found.theta, same.theta, 1e-14);
    expectWithin(found.variant.variance as number, same.variant.variance as number, 1e-13);
    expectWithin(found.variant.value, same.variant.value, 1e-14);
  });

  it("keeps its digits far from 0 and beside an outlier in x", () => {
    const c: Pairs = [
      [1e6 + 1, 1e5 + 2],
      [1e6 + 3, 1e5 + 5],
      [1e6 + 4, 1e5 + 9],
      [1e6 + 2, 1e5 + 4],
    ];
    const t: Pairs = [
      [1e6 + 2, 1e5 + 1],
      [1e6 + 6, 1e5 + 7],
      [1e6 + 1, 1e5 + 2],
    ];
    const low = (units: Pairs): Pairs => units.map(([y, x]) => [y - 1e6, (x ?? 0) - 1e5]);
    expectWithin(present(adjustedOf(c, t)).theta, present(adjustedOf(low(c), low(t))).theta, 1e-12);
    // One x of a million: nearly all of the slope is that unit's, y about 7 a million.
    const out = present(adjustedOf([...low(c), [7, 1e6]], low(t)));
    expect(out.theta).toBeGreaterThan(0);
    expect(out.theta).toBeLessThan(1e-5);
  });
});

function shift(units: Pairs): Pairs {
  return units.map(([y, x]) => [y + 5, x]);
}

function varianceOf(values: readonly number[]): number {
  const mean = values.reduce((a, b) => a + b, 0) / values.length;
  return values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1);
}
