import { expect, it } from "vitest";
import type { CellTable, MetricCells } from "../../src/engine/types.ts";
import { planFromYaml } from "../oracle/plan.ts";
import { wrongSums } from "./sums.ts";

// By hand: 1, 2 and 4 about the pivot 2 at scale 2 are u = -1/2, 0, 1: sums 1/2, 5/4, 7/8, 17/16.
const ONE = 2n ** 60n;
const CELLS: CellTable = {
  pivot: "2",
  scale: 2,
  variant: [0],
  bucket: [0],
  n: [3],
  high1: [ONE / 2n],
  high2: [(ONE * 5n) / 4n],
  high3: [(ONE * 7n) / 8n],
  high4: [(ONE * 17n) / 16n],
  low1: [0n],
  low2: [0n],
  low3: [0n],
  low4: [0n],
  total: [7_000_000_000n],
  smallest: [1_000_000_000n],
  largest: [4_000_000_000n],
};
const PLAN = planFromYaml(
  "variants: [{name: list, control: true}]\nmetrics: [{name: Fare, summary: mean, of: {sum: fare}}]\n",
);

function wrong(change: Partial<CellTable>): string[] {
  const oracle = {
    metric: "Fare",
    leftOut: [0],
    countedRows: 3,
    countedWithoutNumber: 0,
    cap: null,
    values: [1n, 2n, 4n].map((x) => ({
      unit: `u${x}`,
      variant: 0,
      bucket: 0,
      of: x * 1_000_000_000n,
      per: null,
      x: null,
    })),
    since: null,
    quantile: null,
    ledger: [],
  };
  // 1, 2 and 4 are the first quarters of the doublings 0, 1 and 2.
  const sizes = { variant: [0, 0, 0], sign: [1, 1, 1], quarter: [0, 4, 8], units: [1, 1, 1] };
  const of = { ...CELLS, ...change };
  const cells = { metric: "Fare", of, ratio: null, covariate: null, sizes } as unknown as MetricCells;
  return wrongSums(PLAN, oracle, cells);
}

it("finds nothing wrong with sums worked out by hand", () => {
  expect(wrong({})).toEqual([]);
});
it("finds a sum that is off by more than its terms may round", () => {
  expect(wrong({ low1: [2n ** 70n] })).toHaveLength(1);
  expect(wrong({ high4: [(ONE * 17n) / 16n + 2n ** 12n] })).toHaveLength(1);
});
it("finds a scale that is not the smallest power of two that holds all", () => {
  expect(wrong({ scale: 4 }).join()).toContain("the scale 4 is not the smallest power of two");
  expect(wrong({ scale: 3 }).join()).toContain("not a power of two");
});
