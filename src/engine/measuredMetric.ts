import type { Metric } from "../plan/index.ts";
import {
  CELL_DEGREES,
  type Group,
  groupsOfCells,
  groupsOfPairs,
  overScales,
  PAIR_DEGREES,
  together,
} from "./groups.ts";
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
  /** A ratio's denominator or a covariate. */
  readonly paired: { readonly x: DecimalMeasure; readonly of: CellTable; readonly joint: JointTable } | null;
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
export function armsOfCells({ y, of }: MeasuredMetric, scales: Scales): Group[] {
  return byArm(groupsOfCells(of)).map((group) => overScales(group, CELL_DEGREES, [bitsOver(y.scale, scales.y)]));
}

export function armsOfPairs(one: MeasuredMetric, scales: Scales): Group[] {
  if (one.paired === null) return [];
  const bits = [bitsOver(one.y.scale, scales.y), bitsOver(one.paired.x.scale, scales.x)];
  return byArm(groupsOfPairs(one.paired.joint)).map((group) => overScales(group, PAIR_DEGREES, bits));
}

/** log2 of how many times a power of two another is. */
const bitsOver = (from: number, to: number): number => Math.round(Math.log2(to / from));

function byArm(groups: readonly Group[]): Group[] {
  const variants = [...new Set(groups.map(({ variant }) => variant))].sort((a, b) => a - b);
  return variants.flatMap((variant) => together(groups.filter((group) => group.variant === variant)) ?? []);
}
