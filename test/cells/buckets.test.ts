import { describe, expect, it } from "vitest";
import { buckets } from "../../src/cells/buckets.ts";
import type { BucketCells, JointSums, PowerSums } from "../../src/cells/types.ts";
import type { CellTable, JointTable, MetricCells } from "../../src/engine/types.ts";
import { expectWithin } from "../stats/expect.ts";
import { covariateGroups } from "../stats/pairs.ts";

type Unit = readonly [variant: number, bucket: number, y: number, x: number | null];

const UNITS: readonly Unit[] = [
  [0, 3, 1.5, 10],
  [0, 3, -2, 12],
  [0, 900, 7, null],
  [1, 3, 4, 8],
  [1, 1023, 0.25, 30],
  [1, 1023, 9, null],
  [2, 3, 100, 100],
];

const high = (sum: bigint) => (sum >> 60n) - 2n;
const low = (sum: bigint) => sum - (high(sum) << 60n);

/** Cells as an engine gives them, in the order of `places`. */
function cellsOf(units: readonly Unit[], places: readonly (readonly [variant: number, bucket: number])[]) {
  const groups = places.map(([v, b]) => units.filter(([variant, bucket]) => variant === v && bucket === b));
  const arms = covariateGroups(groups.map((group) => group.map(([, , y, x]) => [y, x] as const)));
  const columns = { variant: places.map(([v]) => v), bucket: places.map(([, b]) => b) };
  const table = (sums: readonly PowerSums[]): CellTable => {
    const power = (k: 0 | 1 | 2 | 3, part: (sum: bigint) => bigint) => sums.map(({ powers }) => part(powers[k]));
    const none = sums.map(() => 0n);
    return {
      ...columns,
      pivot: sums[0]?.pivot ?? "0",
      scale: sums[0]?.scale ?? 1,
      n: sums.map(({ n }) => n),
      ...{ high1: power(0, high), high2: power(1, high), high3: power(2, high), high4: power(3, high) },
      ...{ low1: power(0, low), low2: power(1, low), low3: power(2, low), low4: power(3, low) },
      ...{ total: none, smallest: none, largest: none },
    };
  };
  const joints = arms.map(({ joint }) => joint);
  const sum = (jk: "s10" | "s01" | "s20" | "s11" | "s02", part: (sum: bigint) => bigint) =>
    joints.map((joint: JointSums) => part(joint[jk]));
  const joint: JointTable = {
    ...columns,
    pivots: joints[0]?.pivots ?? ["0", "0"],
    scales: joints[0]?.scales ?? [1, 1],
    n: joints.map(({ n }) => n),
    ...{ high10: sum("s10", high), high01: sum("s01", high), high20: sum("s20", high) },
    ...{ high11: sum("s11", high), high02: sum("s02", high), low10: sum("s10", low), low01: sum("s01", low) },
    ...{ low20: sum("s20", low), low11: sum("s11", low), low02: sum("s02", low) },
    totalY: joints.map(({ totals }) => totals[0]),
    totalX: joints.map(({ totals }) => totals[1]),
  };
  const of = table(arms.map(({ value }) => value));
  const x = table(arms.map(({ covariate }) => covariate));
  return { metric: "Fare", of, ratio: null, covariate: { x, joint } } satisfies Partial<MetricCells>;
}

const PLACES = [
  [0, 3],
  [0, 900],
  [1, 3],
  [1, 1023],
  [2, 3],
] as const;
const found = (kind: BucketCells["kind"]) => buckets(cellsOf(UNITS, PLACES), kind, 0, 1);

describe("the cells of a contrast by bucket", () => {
  it("hold each bucket's units and sums at its place, and nothing of other variants", () => {
    const { cells } = found("mean");
    if (cells.kind !== "mean") throw new Error(cells.kind);
    const { pivot, scale } = cellsOf(UNITS, PLACES).of;
    const u = (y: number) => (y - Number(pivot)) / scale;
    expect([cells.control.n.length, cells.variant.n.length]).toEqual([1024, 1024]);
    expect([cells.control.n[3], cells.control.n[900], cells.control.n[1023]]).toEqual([2, 1, 0]);
    expect([cells.variant.n[3], cells.variant.n[900], cells.variant.n[1023]]).toEqual([1, 0, 2]);
    expectWithin(cells.control.s1[3] ?? null, u(1.5) + u(-2), 1e-14);
    expectWithin(cells.control.s2[3] ?? null, u(1.5) ** 2 + u(-2) ** 2, 1e-14);
    expect(cells.variant.s2.reduce((a, b) => a + b)).toBeCloseTo(u(4) ** 2 + u(0.25) ** 2 + u(9) ** 2, 12);
  });

  it("put a unit without a covariate at the mean of x over both arms", () => {
    const { cells } = found("adjusted");
    if (cells.kind === "mean") throw new Error(cells.kind);
    const { pivots, scales } = cells;
    const u = (y: number) => (y - pivots[0]) / scales[0];
    const w = (x: number) => (x - pivots[1]) / scales[1];
    const centre = (10 + 12 + 8 + 30) / 4;
    expect(cells.control.n[900]).toBe(1);
    expectWithin(cells.control.x[900] ?? null, w(centre), 1e-13);
    expectWithin(cells.control.yx[900] ?? null, u(7) * w(centre), 1e-12);
    expect(cells.variant.xx[1023]).toBeCloseTo(w(30) ** 2 + w(centre) ** 2, 12);
    expect(cells.variant.yx[1023]).toBeCloseTo(u(0.25) * w(30) + u(9) * w(centre), 12);
    expect(cells.control.yy[3]).toBeCloseTo(u(1.5) ** 2 + u(-2) ** 2, 12);
  });

  it("are the same, and seeded by the same numbers, for any order of the engine's rows", () => {
    const turned = buckets(cellsOf(UNITS, [...PLACES].reverse()), "mean", 0, 1);
    expect(turned).toEqual(found("mean"));
    const changed = UNITS.map((unit): Unit => (unit[2] === 7 ? [0, 900, 7.000001, null] : unit));
    expect(buckets(cellsOf(changed, PLACES), "mean", 0, 1).numbers).not.toEqual(found("mean").numbers);
  });

  it("hold a ratio's numerator and denominator together", () => {
    const table = cellsOf(UNITS, PLACES);
    const none = { scale: 1, variant: [], bucket: [], n: [], smallest: [], largest: [] };
    const empty = { high1: [], high2: [], high3: [], high4: [], low1: [], low2: [], low3: [], low4: [] };
    const ratio = { per: table.covariate.x, score: { ...none, ...empty }, joint: table.covariate.joint };
    const { cells } = buckets({ ...table, ratio }, "ratio", 0, 1);
    if (cells.kind === "mean") throw new Error(cells.kind);
    const [u, w] = [(1.5 - cells.pivots[0]) / cells.scales[0], (10 - cells.pivots[1]) / cells.scales[1]];
    const [v, z] = [(-2 - cells.pivots[0]) / cells.scales[0], (12 - cells.pivots[1]) / cells.scales[1]];
    expect(cells.control.n[3]).toBe(2);
    expect(cells.control.yx[3]).toBeCloseTo(u * w + v * z, 12);
    expect(cells.control.xx[3]).toBeCloseTo(w * w + z * z, 12);
  });

  it("need the joint cells of a ratio", () => {
    expect(() => found("ratio")).toThrow("without the joint cells");
  });
});
