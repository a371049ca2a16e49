import type { Metric } from "../plan/index.ts";
import { CELL_DEGREES, type Group, groupOfRows, overScales, PAIR_DEGREES } from "./groups.ts";
import { nanoOf } from "./nano.ts";
import { powerOfTwoOver } from "./pivot.ts";
import type { Statement } from "./sql/index.ts";
import type { DecimalMeasure } from "./tables.ts";
import type { CellTable, JointTable } from "./types.ts";

/** A metric with the cells of the plan's own choice, which other choices start from. */
export interface MeasuredMetric {
  readonly metric: Metric;
  /** The value before the cap. */
  readonly plain: Statement;
  readonly cap: string | null;
  readonly y: DecimalMeasure;
  readonly of: CellTable;
  /** The sums of each arm. */
  readonly arms: readonly Group[];
  /** A ratio's denominator or a covariate. */
  readonly paired: {
    readonly x: DecimalMeasure;
    readonly of: CellTable;
    readonly joint: JointTable;
    readonly arms: readonly Group[];
  } | null;
}

/** Larger scales than the plan's own, where other choices hold larger values. */
export interface Scales {
  readonly y: number;
  readonly x: number;
}

export const ownScales = ({ y, paired }: MeasuredMetric): Scales => ({ y: y.scale, x: paired?.x.scale ?? 1 });

/** The scale that reaches from a pivot to both ends too, and is no smaller than before. */
export function widened(scale: number, pivot: string, ends: readonly [bigint, bigint] | null): number {
  if (ends === null) return scale;
  const from = nanoOf(pivot);
  const reach = ends.map((end) => (end < from ? from - end : end - from));
  return Math.max(scale, ...reach.map(powerOfTwoOver));
}

/** The plan's own sums, arm by arm, over other scales. */
export function armsOfCells({ y, arms }: MeasuredMetric, scales: Scales): Group[] {
  return arms.map((group) => overScales(group, CELL_DEGREES, [bitsOver(y.scale, scales.y)]));
}

export function armsOfPairs(one: MeasuredMetric, scales: Scales): Group[] {
  if (one.paired === null) return [];
  const bits = [bitsOver(one.y.scale, scales.y), bitsOver(one.paired.x.scale, scales.x)];
  return one.paired.arms.map((group) => overScales(group, PAIR_DEGREES, bits));
}

/** log2 of how many times a power of two another is. */
const bitsOver = (from: number, to: number): number => Math.round(Math.log2(to / from));

/** The sums of each arm, over its buckets. */
export const armsOfTable = (table: CellTable): Group[] =>
  rowsByArm(table).map((arm) =>
    groupOfRows(
      arm,
      table,
      [
        [table.high1, table.low1],
        [table.high2, table.low2],
        [table.high3, table.low3],
        [table.high4, table.low4],
      ],
      [table.total],
      [table.smallest, table.largest],
    ),
  );

export const armsOfJoint = (table: JointTable): Group[] =>
  rowsByArm(table).map((arm) =>
    groupOfRows(
      arm,
      table,
      [
        [table.high10, table.low10],
        [table.high01, table.low01],
        [table.high20, table.low20],
        [table.high11, table.low11],
        [table.high02, table.low02],
      ],
      [table.totalY, table.totalX],
      null,
    ),
  );

function rowsByArm({ variant }: CellTable | JointTable): { readonly variant: number; readonly rows: number[] }[] {
  const arms = new Map<number, number[]>();
  for (const [row, arm] of variant.entries()) {
    const rows = arms.get(arm);
    if (rows === undefined) arms.set(arm, [row]);
    else rows.push(row);
  }
  return [...arms].sort(([a], [b]) => a - b).map(([arm, rows]) => ({ variant: arm, rows }));
}
