import { readFileSync } from "node:fs";
import type { BucketCells, BucketSums, PairSums } from "../../src/stats/bucket-cells.ts";

/** One unit: its bucket, whether it is the variant's, its value and what goes with it. */
export type Unit = readonly [bucket: number, isVariant: 0 | 1, y: number, x: number];

/** Cells of units, about pivots and in scales that are not theirs, as the engine's are. */
export function cellsOf(kind: BucketCells["kind"], units: readonly Unit[], buckets: number): BucketCells {
  const of = (variant: 0 | 1) => units.filter(([, isVariant]) => isVariant === variant);
  if (kind === "mean") return { kind, control: sumsOf(of(0), buckets), variant: sumsOf(of(1), buckets) };
  const [pivots, scales] = [[0.75, -2] as const, [8, 16] as const];
  return { kind, pivots, scales, control: pairsOf(of(0), buckets), variant: pairsOf(of(1), buckets) };

  function pairsOf(of: readonly Unit[], many: number): PairSums {
    const part = (term: (u: number, w: number) => number) =>
      summed(of, many, (y, x) => term((y - pivots[0]) / scales[0], (x - pivots[1]) / scales[1]));
    return {
      n: part(() => 1),
      y: part((u) => u),
      x: part((_, w) => w),
      yy: part((u) => u * u),
      yx: part((u, w) => u * w),
      xx: part((_, w) => w * w),
    };
  }
}

function sumsOf(units: readonly Unit[], buckets: number): BucketSums {
  const part = (power: number) => summed(units, buckets, (y) => ((y - 0.75) / 8) ** power);
  return { n: part(0), s1: part(1), s2: part(2) };
}

function summed(units: readonly Unit[], buckets: number, term: (y: number, x: number) => number): Float64Array {
  const sums = new Float64Array(buckets);
  for (const [bucket, , y, x] of units) sums[bucket] = (sums[bucket] ?? 0) + term(y, x);
  return sums;
}

/** Cells of units that are dealt to the buckets in turn. */
export function meanCells(control: readonly number[], variant: readonly number[], buckets = 1024): BucketCells {
  const units = [
    ...control.map((y, i): Unit => [i % buckets, 0, y, 0]),
    ...variant.map((y, i): Unit => [i % buckets, 1, y, 0]),
  ];
  return cellsOf("mean", units, buckets);
}

/** Made by test/reference/resampling.py: 2,000,000 draws each, and all deals. */
export const resampled = () =>
  JSON.parse(readFileSync(new URL("../reference/resampling.json", import.meta.url), "utf8")) as {
    bootstrap: {
      kind: BucketCells["kind"];
      units: Unit[];
      estimate: number;
      standardError: number;
      low: number;
      high: number;
    }[];
    randomisation: { control: number[]; variant: number[]; p: number };
  };
