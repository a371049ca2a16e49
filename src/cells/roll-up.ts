import { op, table } from "arquero";
import type { CellTable, ScoreTable } from "../engine/types.ts";
import { fraction, nearestNumber } from "./fraction.ts";
import { NANO, noUnits, powers, type SumsRow } from "./sums.ts";
import type { PowerSums } from "./types.ts";

/** Sums that every kind of cells has; Arquero adds bigint columns exactly. */
const SUMS = Object.fromEntries(
  ["n", "high1", "high2", "high3", "high4", "low1", "low2", "low3", "low4"].map((column) => [column, op.sum(column)]),
);
const ENDS = { smallest: op.min("smallest"), largest: op.max("largest") };

type PartRow = SumsRow & {
  readonly variant: number;
  readonly total: bigint;
  readonly smallest: bigint;
  readonly largest: bigint;
};
type ScoreRow = SumsRow & { readonly variant: number; readonly smallest: number; readonly largest: number };

/** Sums of one metric part per variant, in plan order; a variant without units gets sums of n 0. */
export function partSums(cells: CellTable, variants: number): PowerSums[] {
  const { pivot, scale, ...columns } = cells;
  const rows = table(columns)
    .groupby("variant")
    .rollup({ ...SUMS, ...ENDS, total: op.sum("total") })
    .objects() as PartRow[];
  return byVariant(rows, variants, noUnits(pivot, scale, 0n), (row) => ({
    n: row.n,
    pivot,
    scale,
    powers: powers(row),
    total: row.total,
    smallest: decimal(row.smallest),
    largest: decimal(row.largest),
  }));
}

/** The same of doubles measured against 0. */
export function scoreSums(cells: ScoreTable, variants: number): PowerSums[] {
  const { scale, ...columns } = cells;
  const rows = table(columns)
    .groupby("variant")
    .rollup({ ...SUMS, ...ENDS })
    .objects() as ScoreRow[];
  return byVariant(rows, variants, noUnits("0", scale, null), (row) => ({
    n: row.n,
    pivot: "0",
    scale,
    powers: powers(row),
    total: null,
    smallest: row.smallest,
    largest: row.largest,
  }));
}

/** One of each variant, in plan order; `none` where it has no row. */
export function byVariant<Row extends { readonly variant: number }, Sums>(
  rows: readonly Row[],
  variants: number,
  none: Sums,
  sums: (row: Row) => Sums,
): Sums[] {
  const found = new Map(rows.map((row) => [row.variant, sums(row)]));
  return Array.from({ length: variants }, (_, variant) => found.get(variant) ?? none);
}

function decimal(nano: bigint): number {
  return nearestNumber(fraction(nano, NANO));
}
