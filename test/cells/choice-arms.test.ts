import { describe, expect, it } from "vitest";
import { armsWithoutLargest, choiceArms, loggedArms } from "../../src/cells/index.ts";
import { alike, cellsOfGroups, together } from "../../src/engine/groups.ts";
import type { MetricCells } from "../../src/engine/types.ts";
import { contrast, isAbsent, level } from "../../src/stats/index.ts";
import { metricOf } from "../checks/make.ts";

const ONE = 10n ** 9n;
const MEAN = metricOf({ name: "Fare", summary: "mean" });

/** Cells of whole numbers about the pivot 0 at scale 16, one row an arm, with its ends. */
function cellsOf(arms: readonly (readonly number[])[]): MetricCells {
  const groups = arms.flatMap((values, variant) => {
    const units = values.map((value) => alike(variant, 1, BigInt(value) * ONE, 0n, 16));
    return together(units) ?? [];
  });
  const end = (value: number) => ({ value: BigInt(value) * ONE, x: null });
  return {
    metric: "Fare",
    leftOut: [0, 0],
    notZero: [0, 0],
    countedRows: 0,
    countedWithoutNumber: 0,
    cap: null,
    of: cellsOfGroups("0", 16, groups),
    ratio: null,
    covariate: null,
    sizes: null,
    choices: [],
    ends: arms.map((values) => ({ smallest: end(Math.min(...values)), largest: end(Math.max(...values)) })),
  };
}

describe("the arms without the unit farthest from their mean", () => {
  it("are those of the other units, whichever end it lies at", () => {
    const found = armsWithoutLargest(
      MEAN,
      cellsOf([
        [1, 2, 3, 16],
        [-9, 4, 5, 6],
      ]),
      2,
    );
    const levels = found?.arms.map((arm) => level(arm)) ?? [];
    // 1, 2, 3 and 4, 5, 6: means 2 and 5, variance 1 over 3 units
    expect(levels.map((one) => (isAbsent(one) ? null : [one.n, one.value, one.variance]))).toEqual([
      [3, 2, expect.closeTo(1 / 3, 14)],
      [3, 5, expect.closeTo(1 / 3, 14)],
    ]);
  });

  it("know when all that is left is one value: then there is no spread, and not one lost in rounding", () => {
    const found = armsWithoutLargest(
      MEAN,
      cellsOf([
        [0, 0, 0, 7],
        [0, 0, 5, 0],
      ]),
      2,
    );
    const [control, variant] = found?.arms ?? [];
    if (control === undefined || variant === undefined) throw new Error("no arms");
    expect(contrast(control, variant, 1.96).why).toEqual({ absent: "zero-variance" });
  });

  it("are none of a share or a quantile, and none where an arm has under three units", () => {
    const cells = cellsOf([
      [1, 2, 3],
      [1, 2, 3],
    ]);
    expect(armsWithoutLargest({ ...MEAN, summary: "proportion" }, cells, 2)).toBeNull();
    expect(armsWithoutLargest({ ...MEAN, summary: "quantile" }, cells, 2)).toBeNull();
    expect(
      armsWithoutLargest(
        MEAN,
        cellsOf([
          [1, 2, 3],
          [1, 2],
        ]),
        2,
      ),
    ).toBeNull();
    expect(armsWithoutLargest(MEAN, cells, 3)).toBeNull();
  });
});

it("a choice's cells are rolled up to arms in plan order, and logarithms have arms of their own", () => {
  const { of } = cellsOf([
    [1, 2, 3],
    [4, 5, 6],
  ]);
  const zeros = { high1: [0n], high2: [0n], high3: [0n], high4: [0n], low1: [0n], low2: [0n], low3: [0n], low4: [0n] };
  const logged = { scale: 1, variant: [1], bucket: [0], n: [4], ...zeros, smallest: [0], largest: [0] };
  const choices = [
    { choice: "no-cap", of, joint: null },
    { choice: "log", logged },
  ] as const;
  const [only, ...others] = choiceArms(MEAN, { choices }, 2);
  expect(others).toEqual([]);
  expect(only?.arms.map((arm) => level(arm))).toMatchObject([{ value: 2 }, { value: 5 }]);
  expect(loggedArms(logged, 2).map((arm) => (arm.kind === "adjusted" ? arm.sums.n : null))).toEqual([0, 4]);
});
