import type { CellTable, JointTable, MetricCells } from "../engine/types.ts";
import { fraction, nearestNumber } from "./fraction.ts";
import { joined, NANO } from "./sums.ts";
import type { BucketCells, BucketSums, PairSums } from "./types.ts";

/** An engine's buckets: two bytes of md5(unit), modulo this (DESIGN 5). */
const BUCKETS = 1024;
const UNIT = 2 ** 120;

/** One contrast by bucket, and the whole numbers that its draws are seeded by. */
export interface Buckets {
  readonly cells: BucketCells;
  /** n and S_1 of both arms by bucket: another log has others, another order of its rows has not. */
  readonly numbers: readonly (readonly bigint[])[];
}

/**
 * One metric's cells of two variants, by bucket, as doubles: each the nearest to the exact sum.
 * @param kind `adjusted` for the contrast adjusted for its covariate: a unit without one is put at the mean of x over both
 *   arms, as the adjusted level does
 */
export function buckets(
  cells: Pick<MetricCells, "metric" | "of" | "ratio" | "covariate">,
  kind: BucketCells["kind"],
  control: number,
  variant: number,
): Buckets {
  const numbers = [control, variant].flatMap((of) => {
    const rows = rowsOf(cells.of, of);
    return [column(rows, (row) => BigInt(cells.of.n[row] ?? 0)), column(rows, (row) => joinedAt(cells.of, row, 1))];
  });
  const own = (of: number) => bucketSums(cells.of, of);
  if (kind === "mean") return { cells: { kind, control: own(control), variant: own(variant) }, numbers };

  const table = kind === "ratio" ? cells.ratio?.joint : cells.covariate?.joint;
  if (table === undefined) throw new Error(`"${cells.metric}" came without the joint cells of a ${kind} contrast`);
  const pairs = [control, variant].map((of) => pairSums(table, of)) as [PairSums, PairSums];
  const [py, px] = table.pivots.map(Number) as [number, number];
  const { scales } = table;
  if (kind === "ratio") {
    return { cells: { kind, pivots: [py, px], scales, control: pairs[0], variant: pairs[1] }, numbers };
  }
  const centre = (centreOf(table, [control, variant]) - px) / scales[1];
  const [c, t] = [withoutCovariate(own(control), pairs[0], centre), withoutCovariate(own(variant), pairs[1], centre)];
  return { cells: { kind, pivots: [py, px], scales, control: c, variant: t }, numbers };
}

function bucketSums(table: CellTable, variant: number): BucketSums {
  const rows = rowsOf(table, variant);
  return {
    n: doubles(rows, (row) => table.n[row] ?? 0),
    s1: doubles(rows, (row) => Number(joinedAt(table, row, 1)) / UNIT),
    s2: doubles(rows, (row) => Number(joinedAt(table, row, 2)) / UNIT),
  };
}

function pairSums(table: JointTable, variant: number): PairSums {
  const rows = rowsOf(table, variant);
  const part = (jk: "10" | "01" | "20" | "11" | "02") =>
    doubles(rows, (row) => Number(joined(table[`high${jk}`][row] ?? 0n, table[`low${jk}`][row] ?? 0n)) / UNIT);
  return {
    n: doubles(rows, (row) => table.n[row] ?? 0),
    y: part("10"),
    x: part("01"),
    yy: part("20"),
    yx: part("11"),
    xx: part("02"),
  };
}

/** X over the units of both arms that have an x; 0 where none has. */
function centreOf(table: JointTable, variants: readonly number[]): number {
  const rows = table.variant.flatMap((variant, row) => (variants.includes(variant) ? [row] : []));
  const n = rows.reduce((sum, row) => sum + (table.n[row] ?? 0), 0);
  const total = rows.reduce((sum, row) => sum + (table.totalX[row] ?? 0n), 0n);
  return n === 0 ? 0 : nearestNumber(fraction(total, BigInt(n) * NANO));
}

/** Adds the units without an x, which then have that of the centre. */
function withoutCovariate(all: BucketSums, pair: PairSums, centre: number): PairSums {
  const at = (values: Float64Array, i: number) => values[i] ?? 0;
  const missing = all.n.map((n, i) => n - at(pair.n, i));
  const missingY = all.s1.map((sum, i) => (at(missing, i) === 0 ? 0 : sum - at(pair.y, i)));
  return {
    n: all.n,
    y: all.s1,
    x: pair.x.map((sum, i) => sum + centre * at(missing, i)),
    yy: all.s2,
    yx: pair.yx.map((sum, i) => sum + centre * at(missingY, i)),
    xx: pair.xx.map((sum, i) => sum + centre * centre * at(missing, i)),
  };
}

/** The row of each bucket that the variant has units in, at the bucket's place. */
function rowsOf(table: Pick<CellTable, "variant" | "bucket">, variant: number): (number | undefined)[] {
  const rows = new Array<number | undefined>(BUCKETS).fill(undefined);
  table.variant.forEach((of, row) => {
    const bucket = table.bucket[row] ?? 0;
    if (bucket >= BUCKETS) throw new Error(`bucket ${bucket} of ${BUCKETS}`);
    if (of === variant) rows[bucket] = row;
  });
  return rows;
}

function joinedAt(table: CellTable, row: number, k: 1 | 2): bigint {
  return joined(table[`high${k}`][row] ?? 0n, table[`low${k}`][row] ?? 0n);
}

function doubles(rows: readonly (number | undefined)[], value: (row: number) => number): Float64Array {
  return Float64Array.from(rows, (row) => (row === undefined ? 0 : value(row)));
}

function column(rows: readonly (number | undefined)[], value: (row: number) => bigint): bigint[] {
  return rows.map((row) => (row === undefined ? 0n : value(row)));
}
