import type { CellTable, JointTable, ScoreTable } from "../engine/types.ts";
import { joined } from "./sums.ts";
import type { BucketSums, PairSums } from "./types.ts";

/** How many there are: a unit's bucket is the first two bytes of md5 of its id, modulo this (DESIGN 5). */
export const BUCKETS = 1024;

/** One in the units of an exact sum. */
const ONE = 2 ** 120;

/**
 * n, S_1 and S_2 of one value by bucket, as doubles; a bucket without units has zeros.
 * @param variants how many the plan has
 * @returns index = variant in plan order; about the table's pivot and in its scale
 */
export function bucketSums(cells: CellTable | ScoreTable, variants: number): BucketSums[] {
  return byBucket(cells, variants, (places) => ({
    n: spread(places, (row) => cells.n[row] ?? 0),
    s1: spread(places, sumOf(cells.high1, cells.low1)),
    s2: spread(places, sumOf(cells.high2, cells.low2)),
  }));
}

/** The same of two values and their products. */
export function bucketPairs(cells: JointTable, variants: number): PairSums[] {
  return byBucket(cells, variants, (places) => ({
    n: spread(places, (row) => cells.n[row] ?? 0),
    y: spread(places, sumOf(cells.high10, cells.low10)),
    x: spread(places, sumOf(cells.high01, cells.low01)),
    yy: spread(places, sumOf(cells.high20, cells.low20)),
    yx: spread(places, sumOf(cells.high11, cells.low11)),
    xx: spread(places, sumOf(cells.high02, cells.low02)),
  }));
}

/**
 * The pairs of all units with a y, where those without an x have `without` for it: what resampling takes of an adjusted
 * contrast.
 * @param pairs of the units that have both, with the pivot and the scale of y that `all` has
 * @param without x in its scale, less its pivot
 */
export function withoutX(all: BucketSums, pairs: PairSums, without: number): PairSums {
  const rest = (whole: Float64Array, part: Float64Array) => whole.map((sum, i) => sum - (part[i] ?? 0));
  const [n, y] = [rest(all.n, pairs.n), rest(all.s1, pairs.y)];
  const plus = (sums: Float64Array, more: Float64Array, factor: number) =>
    sums.map((sum, i) => sum + factor * (more[i] ?? 0));
  return {
    n: all.n,
    y: all.s1,
    x: plus(pairs.x, n, without),
    yy: all.s2,
    yx: plus(pairs.yx, y, without),
    xx: plus(pairs.xx, n, without * without),
  };
}

/** Whole numbers of each variant by bucket that tell its cells from others': what draws are seeded by. */
export function bucketNumbers(
  cells: { readonly variant: readonly number[]; readonly bucket: readonly number[] },
  columns: readonly (readonly (number | bigint)[])[],
  variants: number,
): (number | bigint)[][][] {
  return byBucket(cells, variants, (places) =>
    columns.map((column) => {
      const numbers = new Array<number | bigint>(BUCKETS).fill(0);
      for (const [bucket, row] of places) numbers[bucket] = column[row] ?? 0;
      return numbers;
    }),
  );
}

type Place = readonly [bucket: number, row: number];

function byBucket<Sums>(
  cells: { readonly variant: readonly number[]; readonly bucket: readonly number[] },
  variants: number,
  sums: (places: readonly Place[]) => Sums,
): Sums[] {
  const places = Array.from({ length: variants }, (): Place[] => []);
  cells.variant.forEach((variant, row) => {
    const bucket = cells.bucket[row] ?? -1;
    if (!(bucket >= 0 && bucket < BUCKETS)) throw new Error(`a cell of bucket ${bucket}, of ${BUCKETS}`);
    places[variant]?.push([bucket, row]);
  });
  return places.map((own) => sums(own));
}

function spread(places: readonly Place[], of: (row: number) => number): Float64Array {
  const sums = new Float64Array(BUCKETS);
  for (const [bucket, row] of places) sums[bucket] = of(row);
  return sums;
}

function sumOf(high: readonly bigint[], low: readonly bigint[]): (row: number) => number {
  return (row) => Number(joined(high[row] ?? 0n, low[row] ?? 0n)) / ONE;
}
