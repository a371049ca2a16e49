import type { CellTable, JointTable, KeptBuckets, MetricCells, ScoreTable } from "../engine/types.ts";
import type { Metric } from "../plan/types.ts";

/** Sums of fewer units are not kept: they would come near to single ones. */
const UNITS_AT_LEAST = 10;

/**
 * A metric's cells as they are kept: no more than the statistics need. Sums by bucket stay only where each holds 10 units or
 * more, and only those that draws are made from; all else is one row an arm.
 * @param said what the buckets say, kept in their place where they go
 */
export function coarseCells(metric: Metric, cells: MetricCells, said: () => readonly KeptBuckets[]): MetricCells {
  const { ratio, covariate } = cells;
  const drawnFrom = [
    ...(ratio === null ? [cells.of] : [ratio.joint]),
    ...(covariate === null ? [] : [covariate.joint]),
  ];
  const isQuantile = metric.summary === "quantile";
  const stay =
    !isQuantile && cells.kept === undefined && drawnFrom.every(({ n }) => n.every((m) => m >= UNITS_AT_LEAST));
  const joint = (table: JointTable) => (stay ? withTotalsOnce(table, JOINT_TOTALS) : byArm(table, JOINT_SUMS));
  return {
    ...cells,
    of: stay && ratio === null ? withTotalsOnce(table(cells.of), CELL_REST) : table(byArm(cells.of, CELL_SUMS)),
    ratio:
      ratio === null
        ? null
        : { per: byArm(ratio.per, CELL_SUMS), score: byArm(ratio.score, SCORE_SUMS), joint: joint(ratio.joint) },
    covariate: covariate === null ? null : { x: byArm(covariate.x, CELL_SUMS), joint: joint(covariate.joint) },
    ...(stay || isQuantile ? {} : { kept: said() }),
  };
}

/** Cells of adjusted values: only their sums over an arm are used. */
export function coarseScores(scores: ScoreTable): ScoreTable {
  return byArm(scores, SCORE_SUMS);
}

const SCORE_SUMS = ["n", "high1", "high2", "high3", "high4", "low1", "low2", "low3", "low4"] as const;
const CELL_SUMS = [...SCORE_SUMS, "total"] as const;
/** Not needed by bucket. */
const CELL_REST = ["high3", "high4", "low3", "low4", "total"] as const;
const JOINT_TOTALS = ["totalY", "totalX"] as const;
const JOINT_SUMS = [
  "n",
  "high10",
  "high01",
  "high20",
  "high11",
  "high02",
  "low10",
  "low01",
  "low20",
  "low11",
  "low02",
  ...JOINT_TOTALS,
] as const;

type Column = readonly (number | bigint)[];
type Table = { readonly variant: readonly number[]; readonly bucket: readonly number[] };

/** One row a variant: sums added up exactly, the smallest and the largest of all. */
function byArm<T extends Table>(cells: T, sums: readonly (keyof T & string)[]): T {
  const places = placesOf(cells);
  const columns = sums.map((name) => [name, places.map((rows) => sumOver(columnOf(cells, name), rows))]);
  return {
    ...cells,
    ...Object.fromEntries(columns),
    ...endsOf(cells, places),
    variant: places.map((rows) => cells.variant[rows[0] ?? 0]),
    bucket: places.map(() => 0),
  };
}

/** Every row stays; of these columns the first row of a variant has the variant's sum, so that no bucket tells its own. */
function withTotalsOnce<T extends Table>(cells: T, sums: readonly (keyof T & string)[]): T {
  const places = placesOf(cells);
  const columns = sums.map((name) => {
    const column: (number | bigint)[] = columnOf(cells, name).map(() => 0n);
    for (const rows of places) column[rows[0] ?? 0] = sumOver(columnOf(cells, name), rows);
    return [name, column];
  });
  return { ...cells, ...Object.fromEntries(columns) };
}

/** A table whose ends, of an arm each, stand in every row of it. */
function table(cells: CellTable): CellTable {
  const places = placesOf(cells);
  const ends = endsOf(cells, places);
  const own = (column: Column) =>
    cells.variant.map((variant) => column[places.findIndex((rows) => cells.variant[rows[0] ?? 0] === variant)]);
  return { ...cells, smallest: own(ends.smallest ?? []), largest: own(ends.largest ?? []) } as CellTable;
}

function endsOf(cells: Table, places: readonly (readonly number[])[]): { smallest?: Column; largest?: Column } {
  if (!("smallest" in cells)) return {};
  const end = (name: string, isBeyond: (a: number | bigint, b: number | bigint) => boolean) =>
    places.map((rows) => {
      const column = columnOf(cells, name);
      return rows.map((row) => column[row] ?? 0).reduce((a, b) => (isBeyond(b, a) ? b : a));
    });
  return { smallest: end("smallest", (a, b) => a < b), largest: end("largest", (a, b) => a > b) };
}

/** The rows of each variant that has any, variants rising. */
function placesOf({ variant }: Table): number[][] {
  const variants = [...new Set(variant)].sort((a, b) => a - b);
  return variants.map((own) => variant.flatMap((one, row) => (one === own ? [row] : [])));
}

function sumOver(column: Column, rows: readonly number[]): number | bigint {
  const values = rows.map((row) => column[row] ?? 0);
  return typeof values[0] === "bigint"
    ? values.reduce<bigint>((sum, value) => sum + BigInt(value), 0n)
    : values.reduce<number>((sum, value) => sum + Number(value), 0);
}

function columnOf(cells: object, name: string): Column {
  return (cells as Readonly<Record<string, Column>>)[name] ?? [];
}
