import type { BucketCells } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { type DrawTable, gapOfX, tableOfArms } from "./bucket-cells.ts";
import { drawRows, type Studentised, studentised, sumRows } from "./draws.ts";
import { type Seed, wordsOf } from "./generator.ts";
import { type Histogram, histogram } from "./histogram.ts";
import { normalCritical } from "./normal.ts";
import { relative } from "./relative.ts";
import { type NotDrawn, tooFew, tooManyUndefined } from "./resampling.ts";
import type { Counts } from "./share.ts";
import type { TailPair } from "./tails.ts";
import type { Absent, Level, Relative } from "./types.ts";

/** Shares of the units at which the distribution is drawn too, so that its way to the normal curve is seen. */
const SHARES = [1 / 16, 1 / 4] as const;
/** Fewer units in an arm at such a share: not drawn there. */
const UNITS_AT_LEAST = 20;

export interface BootstrapT {
  readonly low: number;
  readonly high: number;
  /** T*(alpha/2) and T*(1 - alpha/2), what stands for -z and z. */
  readonly lowerQuantile: number;
  readonly upperQuantile: number;
  readonly draws: number;
  /** Draws that have no T; left out. */
  readonly undefinedDraws: number;
  /**
   * The drawn distribution of T at n/16, n/4 and n units; null where an arm has under 20 units or T is often undefined. Empty
   * where no picture is asked for.
   */
  readonly drawn: readonly {
    readonly share: number;
    readonly histogram: Histogram | null;
    readonly tails: TailPair | null;
  }[];
}

/**
 * Bootstrap-t interval of the difference, from draws of buckets with replacement, both arms' cells of a bucket together.
 *
 *   T* = (estimate* - estimate) / SE*, a ratio's R and a theta anew each draw;  [D - SE T*(1 - alpha/2), D - SE T*(alpha/2)]
 * T*(q) the (draws + 1) q-th smallest. A bucket holds units at random, so what its sums vary by is what units vary by. The
 * distribution at n/16 and n/4 units draws as many buckets fewer, of all buckets, after those of the interval.
 * @param draws a multiple of 1,000; at least 4 / alpha, else the ends are the extreme draws
 * @returns few units or events, or over 1% of undefined draws: not drawn
 *
 * Source: Hall 1992, The Bootstrap and Edgeworth Expansion, 3.5; Davison and Hinkley 1997, Bootstrap Methods, 5.2.1, eq. 5.7.
 */
export function bootstrapT(
  cells: BucketCells,
  difference: { readonly estimate: number; readonly standardError: number },
  alpha: number,
  draws: number,
  seed: Seed,
  shares: { readonly control: Counts; readonly variant: Counts } | null,
  isPictured = true,
): BootstrapT | NotDrawn {
  const few = tooFew(cells, shares);
  if (few !== null) return few;
  const table = tableOfArms(cells);
  const fill = wordsOf(seed);
  const t = studentised(cells.kind, wholeOf(table), gapOfX(cells));
  const all = drawnT(table, table.rows, draws, t, fill);
  const undefinedDraws = draws - all.length;
  if (tooManyUndefined(undefinedDraws, draws)) return { notDrawn: all.length === 0 ? "no-spread" : "undefined-draws" };

  const { estimate, standardError } = difference;
  const rank = Math.max(1, Math.floor((all.length + 1) * (alpha / 2)));
  const [lowerQuantile, upperQuantile] = [all[rank - 1] as number, all[all.length - rank] as number];
  return {
    low: estimate - standardError * upperQuantile,
    high: estimate - standardError * lowerQuantile,
    lowerQuantile,
    upperQuantile,
    draws,
    undefinedDraws,
    drawn: isPictured ? [...SHARES.map(fewer), { share: 1, ...pictured(all) }] : [],
  };

  function fewer(share: number): BootstrapT["drawn"][number] {
    const units = Math.min(...[cells.control.n, cells.variant.n].map((n) => n.reduce((sum, m) => sum + m, 0)));
    const isShown = units * share >= UNITS_AT_LEAST;
    const values = isShown ? drawnT(table, Math.round(table.rows * share), draws, t, fill) : new Float64Array();
    return { share, ...pictured(values) };
  }

  function pictured(values: Float64Array) {
    return tooManyUndefined(draws - values.length, draws)
      ? { histogram: null, tails: null }
      : { histogram: histogram(values), tails: beyond(values, normalCritical(alpha)) };
  }
}

/**
 * Relative difference by the same quantiles: all r - 1 for which (level_t - r level_c) / sqrt(v_t + r^2 v_c) lies between
 * them. It excludes 0 exactly when the difference's interval does; at other r the quantiles, drawn at 1, are an
 * approximation.
 * @returns as Fieller's interval with the larger of both quantiles' sizes
 *
 * Source: Fieller 1954, JRSS B 16, 175-185.
 */
export function bootstrapRelative(
  control: Level,
  variant: Level,
  { lowerQuantile, upperQuantile }: Pick<BootstrapT, "lowerQuantile" | "upperQuantile">,
): Relative | Absent {
  const [low, high] = [endAt(upperQuantile), endAt(lowerQuantile)];
  if (isAbsent(low)) return low;
  if (isAbsent(high)) return high;
  return { estimate: low.estimate, low: low.end, high: high.end };

  /** r - 1 with T at this quantile: below the estimate for one above 0. */
  function endAt(quantile: number): { readonly estimate: number; readonly end: number | null } | Absent {
    const found = relative(control, variant, Math.abs(quantile));
    if (isAbsent(found)) return found;
    return { estimate: found.estimate, end: quantile > 0 ? found.low : found.high };
  }
}

/** Shares of the values below -z and above z. */
function beyond(values: Float64Array, z: number): TailPair {
  const share = (isBeyond: (value: number) => boolean) => values.filter(isBeyond).length / values.length;
  return { lowerTail: share((value) => value < -z), upperTail: share((value) => value > z) };
}

/** T of each draw of `many` buckets, sorted; without the undefined ones. */
function drawnT(
  table: DrawTable,
  many: number,
  draws: number,
  t: Studentised,
  fill: (into: Uint32Array) => void,
): Float64Array {
  const picks = new Uint32Array(many);
  const sums = new Float64Array(table.width);
  const values = new Float64Array(draws);
  let kept = 0;
  for (let draw = 0; draw < draws; draw++) {
    drawRows(picks, table.rows, fill);
    sumRows(table, picks, sums);
    const value = t(sums);
    if (!Number.isNaN(value)) values[kept++] = value;
  }
  return values.subarray(0, kept).sort();
}

/** The sums over all buckets. */
function wholeOf(table: DrawTable): Float64Array {
  const sums = new Float64Array(table.width);
  sumRows(
    table,
    Uint32Array.from({ length: table.rows }, (_, row) => row),
    sums,
  );
  return sums;
}
