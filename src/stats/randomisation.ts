import type { BucketCells } from "../cells/types.ts";
import { armsAboutBoth, tableOfBoth } from "./bucket-cells.ts";
import { dealRows, studentised, sumRows } from "./draws.ts";
import { type Seed, wordsOf } from "./generator.ts";
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

  const fill = wordsOf(seed);
  const order = Uint32Array.from({ length: table.rows }, (_, row) => row);
  const both = new Float64Array(table.width);
  sumRows(table, order, both);
  const [units = 0, variantUnits = 0] = [arms[0], arms[arms.length / 2]];
  const toVariant = dealtToVariant(units, variantUnits, table.rows);
  // Only the arm with fewer buckets is dealt and added up: the other one has the rest.
  const words = new Uint32Array(Math.min(toVariant, table.rows - toVariant));
  const dealt = order.subarray(0, words.length);
  const sums = new Float64Array(arms.length);
  const halves = [sums.subarray(0, table.width), sums.subarray(table.width)] as const;
  const [fewer, rest] = toVariant === words.length ? [halves[1], halves[0]] : halves;
  let [reached, undefinedDeals] = [0, 0];
  for (let deal = 0; deal < deals; deal++) {
    dealRows(order, words, fill);
    sumRows(table, dealt, fewer);
    for (let i = 0; i < rest.length; i++) rest[i] = (both[i] as number) - (fewer[i] as number);
    const value = Math.abs(t(sums));
    if (Number.isNaN(value)) undefinedDeals++;
    // Deals that are the observed one must count, whatever the order in which they were added up.
    else if (value >= observed * (1 - 1e-9)) reached++;
  }
  if (tooManyUndefined(undefinedDeals, deals)) return { notDrawn: "undefined-draws" };
  return { p: (1 + reached) / (1 + deals - undefinedDeals), deals, undefinedDeals };
}

/** Buckets for the variant, by its share of the units; each arm gets one. */
export function dealtToVariant(control: number, variant: number, rows: number): number {
  return Math.min(rows - 1, Math.max(1, Math.round((rows * variant) / (control + variant))));
}
