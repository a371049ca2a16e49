import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { ArmCells } from "../../src/cells/arms.ts";
import { arms } from "../../src/cells/index.ts";
import type { Arm, PowerSums } from "../../src/cells/types.ts";
import type { CellTable, ScoreTable } from "../../src/engine/types.ts";
import type { Summary } from "../../src/plan/types.ts";
import { metricOf } from "../checks/make.ts";
import { sumsTogether } from "../stats/arms.ts";
import { cellTable, highAndLow, noScores, type Unit } from "./tables.ts";

const metric = (summary: Summary) => metricOf({ name: "Fare", summary });

const cellsOf = (of: CellTable, ratio: ArmCells["ratio"] = null): ArmCells => ({ of, ratio });

const unit = fc.tuple(
  fc.nat(2),
  fc.nat(5),
  fc.oneof(
    fc.integer({ min: -100, max: 100 }),
    fc.integer({ min: 0, max: 1e12 }).map((n) => n / 1e4),
    fc.constant(1e9),
  ),
);

describe("arms", () => {
  it("are the exact sums over their buckets, however the units fell into buckets", () => {
    fc.assert(
      fc.property(fc.array(unit, { minLength: 1, maxLength: 40 }), (units) => {
        const found = arms(metric("mean"), cellsOf(cellTable(units)), 3);
        const whole = sumsTogether(
          [0, 1, 2].map((v) => units.filter(([variant]) => variant === v).map(([, , x]) => x)),
        );
        expect(found).toEqual(whole.map((sums) => ({ kind: "mean", sums })));
      }),
    );
  });

  it("stand in plan order, whatever the order of the cells", () => {
    const units: Unit[] = [
      [2, 7, 30],
      [0, 1, 10],
      [1, 3, 20],
      [0, 9, 11],
    ];
    const found = arms(metric("mean"), cellsOf(cellTable(units)), 3) as Extract<Arm, { readonly sums: PowerSums }>[];
    expect(found.map(({ sums }) => [sums.n, sums.total])).toEqual([
      [2, 21_000_000_000n],
      [1, 20_000_000_000n],
      [1, 30_000_000_000n],
    ]);
  });

  it("of a variant without analysed units have sums of none, on the metric's own pivot and scale", () => {
    const table = cellTable([[0, 0, 4.5]]);
    const [, empty] = arms(metric("proportion"), cellsOf(table), 2);
    const { pivot, scale } = table;
    const sums = { n: 0, pivot, scale, powers: [0n, 0n, 0n, 0n], total: 0n, smallest: null, largest: null };
    expect(empty).toEqual({ kind: "proportion", sums });
  });

  it("of a metric without any analysed unit exist all the same", () => {
    const found = arms(metric("mean"), cellsOf(cellTable([])), 2);
    expect(found.map((arm) => (arm.kind === "mean" ? arm.sums.n : null))).toEqual([0, 0]);
  });

  it("keep sums beyond what a double holds", () => {
    const table = cellTable([
      [0, 0, 1],
      [0, 1, 2],
    ]);
    const large = 2n ** 100n + 1n;
    const [arm] = arms(metric("mean"), cellsOf({ ...table, high1: [large, large], low1: [1n, 2n] }), 1);
    expect(arm?.kind === "mean" && arm.sums.powers[0]).toBe(((2n * large) << 60n) + 3n);
  });
});

describe("arms of a ratio", () => {
  const of = cellTable([
    [0, 0, 3],
    [0, 1, 1],
    [1, 0, 5],
    [2, 0, 5],
  ]);
  const per = cellTable([
    [0, 0, 2],
    [0, 1, 6],
    [1, 0, 0],
    [2, 0, -4],
  ]);
  // Variant 0: R = 4 / 8, mean(b) = 4, d = (a - R b) / 4 = 0.5 and -0.5. Variant 2: R = -1.25, one unit with d = 0.
  const [first, second, third] = sumsTogether([[0.5], [-0.5], [0]]) as [PowerSums, PowerSums, PowerSums];
  const score: ScoreTable = {
    scale: first.scale,
    variant: [0, 0, 2],
    bucket: [0, 1, 0],
    n: [1, 1, 1],
    ...highAndLow([first, second, third]),
    smallest: [0.5, -0.5, 0],
    largest: [0.5, -0.5, 0],
  };

  it("hold the score with its ends at d + R", () => {
    const [arm, , negative] = arms(metric("ratio-of-totals"), cellsOf(of, { per, score }), 3);
    expect(arm?.kind === "ratio" && arm.score).toMatchObject({
      n: 2,
      total: null,
      pivot: "0",
      smallest: 0,
      largest: 1,
    });
    expect(negative?.kind === "ratio" && negative.score).toMatchObject({ smallest: -1.25, largest: -1.25 });
  });

  it("have no score where the denominators add up to 0 or there is no unit", () => {
    const found = arms(metric("ratio-of-totals"), cellsOf(of, { per, score }), 4);
    expect(found.map((arm) => arm.kind === "ratio" && arm.score !== null)).toEqual([true, false, true, false]);
    expect(found[3]).toMatchObject({ numerator: { n: 0, total: 0n }, denominator: { n: 0, total: 0n }, score: null });
  });

  it("must have a score for every unit: a lost one is our mistake", () => {
    const short = { ...score, n: [1, 2, 1] };
    expect(() => arms(metric("ratio-of-totals"), cellsOf(of, { per, score: short }), 3)).toThrow(
      "3 scores for 2 units",
    );
    expect(() => arms(metric("ratio-of-totals"), cellsOf(of, null), 3)).toThrow("Fare");
    expect(
      arms(metric("ratio-of-totals"), cellsOf(cellTable([]), { per: cellTable([]), score: noScores }), 1),
    ).toHaveLength(1);
  });
});
