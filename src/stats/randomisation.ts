import { armsAboutBoth, type BucketCells, tableOfBoth } from "./bucket-cells.ts";
import { dealRows, studentised, sumRows } from "./draws.ts";
import { generator, type Seed } from "./generator.ts";
import { type NotDrawn, tooFew, tooManyUndefined } from "./resampling.ts";
import type { Counts } from "./share.ts";

export interface Randomisation {
  /** Two-sided. */
  readonly p: number;
  readonly deals: number;
  /** Deals that have no T; left out. */
  readonly undefinedDeals: number;
}

/**
 * Randomisation test of "no unit was changed by the variant": buckets, both arms' cells added up, are dealt anew to the arms
 * in the observed shares.
 *
 *   p = (1 + deals with |T| at least the observed |T|) / (1 + deals),  T studentised by the deal's own sums
 * Studentised, so that it also holds, for many units, where the arms vary differently. Approximate, since buckets and not
 * units are dealt.
 * @param cells of a contrast that varies; a ratio's R and a theta are found anew each deal
 * @returns few units or events, no observed T, or over 1% of undefined deals: not drawn
 *
 * Source: Fisher 1935, The Design of Experiments, 21; Janssen 1997, Statistics and Probability Letters 36, 9-21, for the
 * studentised statistic; Davison and Hinkley 1997, Bootstrap Methods, 4.3, eq. 4.11, for p.
 */
export function randomisation(
  cells: BucketCells,
  deals: number,
  seed: Seed,
  shares: { readonly control: Counts; readonly variant: Counts } | null,
): Randomisation | NotDrawn {
  const few = tooFew(cells, shares);
  if (few !== null) return few;
  const table = tableOfBoth(cells);
  const arms = armsAboutBoth(cells);
  const t = studentised(cells.kind, arms, 0);
  const observed = Math.abs(t(arms));
  if (Number.isNaN(observed)) return { notDrawn: "no-spread" };

  const next = generator(seed);
  const order = Uint32Array.from({ length: table.rows }, (_, row) => row);
  const many = dealtToVariant(arms, table.rows);
  const [ofVariant, ofControl] = [order.subarray(0, many), order.subarray(many)];
  const sums = new Float64Array(arms.length);
  const [controlSums, variantSums] = [sums.subarray(0, table.width), sums.subarray(table.width)];
  let [reached, undefinedDeals] = [0, 0];
  for (let deal = 0; deal < deals; deal++) {
    dealRows(order, many, next);
    sumRows(table, ofControl, controlSums);
    sumRows(table, ofVariant, variantSums);
    const value = Math.abs(t(sums));
    if (Number.isNaN(value)) undefinedDeals++;
    // Deals that are the observed one must count, whatever the order in which they were added up.
    else if (value >= observed * (1 - 1e-9)) reached++;
  }
  if (tooManyUndefined(undefinedDeals, deals)) return { notDrawn: "undefined-draws" };
  return { p: (1 + reached) / (1 + deals - undefinedDeals), deals, undefinedDeals };
}

/** Buckets for the variant, by its share of the units; each arm gets one. */
function dealtToVariant(arms: Float64Array, rows: number): number {
  const [control = 0, variant = 0] = [arms[0], arms[arms.length / 2]];
  return Math.min(rows - 1, Math.max(1, Math.round((rows * variant) / (control + variant))));
}
