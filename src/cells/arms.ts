import { op, table } from "arquero";
import type { CellTable, MetricCells, ScoreTable } from "../engine/types.ts";
import type { Metric } from "../plan/types.ts";
import { fraction, nearestNumber } from "./fraction.ts";
import { NANO, noUnits, powers, type SumsRow } from "./sums.ts";
import type { Arm, PowerSums } from "./types.ts";

/** Sums that every kind of cells has; Arquero adds bigint columns exactly. */
const SUMS = Object.fromEntries(
  ["n", "high1", "high2", "high3", "high4", "low1", "low2", "low3", "low4"].map((column) => [column, op.sum(column)]),
);
const ENDS = { smallest: op.min("smallest"), largest: op.max("largest") };

/** Order statistics are no cells: they are asked of the units, rank by rank. */
const NONE_ASKED: ReadonlyMap<number, bigint> = new Map();

type PartRow = SumsRow & {
  readonly variant: number;
  readonly total: bigint;
  readonly smallest: bigint;
  readonly largest: bigint;
};
type ScoreRow = SumsRow & { readonly variant: number; readonly smallest: number; readonly largest: number };

/** What an arm is rolled up from; an engine's cells hold more. */
export interface ArmCells {
  readonly of: CellTable;
  readonly ratio: Pick<NonNullable<MetricCells["ratio"]>, "per" | "score"> | null;
}

/**
 * One metric's cells, rolled up over buckets to one arm a variant.
 * @param variants how many the plan has; a variant without analysed units has no cells and gets sums of n 0
 * @returns index = variant in plan order
 */
export function arms(metric: Metric, cells: ArmCells, variants: number): Arm[] {
  const of = partSums(cells.of, variants);
  switch (metric.summary) {
    case "mean":
    case "proportion": {
      const kind = metric.summary;
      return of.map((sums) => ({ kind, sums }));
    }
    case "ratio-of-totals": {
      if (cells.ratio === null) throw new Error(`the ratio "${metric.name}" came without the cells of its denominator`);
      const per = partSums(cells.ratio.per, variants);
      const scores = scoreSums(cells.ratio.score, variants);
      return of.map((numerator, v) => ratioArm(numerator, at(per, v), at(scores, v)));
    }
    case "quantile": {
      const q = metric.quantile;
      if (q === null) throw new Error(`the quantile "${metric.name}" came without its share`);
      return of.map((sums) => ({ kind: "quantile", sums, q, ordered: NONE_ASKED }));
    }
    default:
      return unknown(metric.summary);
  }
}

/** The score as readers see it, d + R: the arm's mean of d is 0, that of the score is the ratio. */
function ratioArm(numerator: PowerSums, denominator: PowerSums, d: PowerSums): Arm {
  if (d.n !== 0 && d.n !== numerator.n) throw new Error(`${d.n} scores for ${numerator.n} units`);
  // An engine gives no score to an arm whose denominators add up to 0.
  if (d.n === 0) return { kind: "ratio", numerator, denominator, score: null };
  const ratio = nearestNumber(fraction(numerator.total ?? 0n, denominator.total ?? 0n));
  const seen = (end: number | null) => (end === null ? null : end + ratio);
  return {
    kind: "ratio",
    numerator,
    denominator,
    score: { ...d, smallest: seen(d.smallest), largest: seen(d.largest) },
  };
}

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

function at(sums: readonly PowerSums[], variant: number): PowerSums {
  const found = sums[variant];
  if (found === undefined) throw new Error(`no sums of variant ${variant} among ${sums.length}`);
  return found;
}

function unknown(summary: never): never {
  throw new Error(`no arms of the summary ${String(summary)}`);
}
