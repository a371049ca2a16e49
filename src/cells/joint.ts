import { op, table } from "arquero";
import type { CellTable, JointTable, ScoreTable } from "../engine/types.ts";
import { byVariant, partSums, scoreSums } from "./roll-up.ts";
import { joined } from "./sums.ts";
import type { CovariateArm, JointSums, PowerSums } from "./types.ts";

const COLUMNS = [
  "n",
  ...["high", "low"].flatMap((part) => ["10", "01", "20", "11", "02"].map((jk) => part + jk)),
  "totalY",
  "totalX",
];
/** Arquero adds bigint columns exactly. */
const SUMS = Object.fromEntries(COLUMNS.map((column) => [column, op.sum(column)]));

type JointRow = { readonly variant: number } & {
  readonly [Column in keyof JointTable as Exclude<
    Column,
    "pivots" | "scales" | "variant" | "bucket"
  >]: JointTable[Column][number];
};

/**
 * The joint sums of a pair of values, rolled up over buckets to one of each variant.
 * @param variants how many the plan has; one without units gets sums of n 0
 * @returns index = variant in plan order
 */
export function jointSums(cells: JointTable, variants: number): JointSums[] {
  const { pivots, scales, ...columns } = cells;
  const rows = table(columns).groupby("variant").rollup(SUMS).objects() as JointRow[];
  const none = { n: 0, s10: 0n, s01: 0n, s20: 0n, s11: 0n, s02: 0n, totals: [0n, 0n] as const };
  return byVariant<JointRow, JointSums>(rows, variants, { pivots, scales, ...none }, (row) => ({
    n: row.n,
    pivots,
    scales,
    s10: joined(row.high10, row.low10),
    s01: joined(row.high01, row.low01),
    s20: joined(row.high20, row.low20),
    s11: joined(row.high11, row.low11),
    s02: joined(row.high02, row.low02),
    totals: [row.totalY, row.totalX],
  }));
}

/**
 * The arms of a metric with its covariate, one of each variant in plan order.
 * @param of y over all units with a value, x over those of them that have one
 */
export function covariateArms(
  of: CellTable,
  covariate: { readonly x: CellTable; readonly joint: JointTable },
  variants: number,
): CovariateArm[] {
  const xs = partSums(covariate.x, variants);
  const joints = jointSums(covariate.joint, variants);
  return partSums(of, variants).map((value, v) => {
    const [x, joint] = [xs[v], joints[v]];
    if (x === undefined || joint === undefined) throw new Error(`no covariate of variant ${v} among ${variants}`);
    return { value, covariate: x, joint };
  });
}

/**
 * The sums of adjusted values y - theta (x - X), from the cells of d = (y - pivot) - theta (x - X).
 * @returns index = variant in plan order; of variants that are no part of the contrast n 0
 */
export function adjustedSums(cells: ScoreTable, pivot: string, variants: number): PowerSums[] {
  const seen = (end: number | null) => (end === null ? null : Number(pivot) + end);
  return scoreSums(cells, variants).map((sums) => ({
    ...sums,
    pivot,
    smallest: seen(sums.smallest),
    largest: seen(sums.largest),
  }));
}
