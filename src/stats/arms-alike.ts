import type { BucketSums } from "./bucket-cells.ts";

/** Kolmogorov's statistic from which arms count as less than alike, and at which as not alike at all: p 0.022 and 0.0007. */
const ALIKE_UP_TO = 1.5;
const APART_FROM = 2;

/** Units in a block at least, and blocks of an arm at least. */
const BLOCK = 8;
const BLOCKS = 16;
/** How far the arms' blocks may be of different size: what is compared would differ by that alone. */
const UNEVEN = 0.02;
/** Sums of squares under this share of the raw one are rounding. */
const ROUNDING = 1e-9;

/**
 * How far two arms look like samples of one distribution, 1 alike to 0 apart, from blocks of about as many units in each.
 *
 * Buckets are merged into blocks of at least 8 units; the blocks' means and the blocks' variances are compared between the
 * arms by the two-sample Kolmogorov-Smirnov statistic, the larger one counts. Moments cannot tell this: a sample of
 * heavy-tailed units lacks its largest ones so often that its skewness says little about its shape; its many blocks do.
 * @returns 0 as well where the arms are too small or too uneven to be told alike
 *
 * Source: Smirnov 1939 (Conover 1999, Practical Nonparametric Statistics, 6.3); blocks and limits are ours, by the
 * calibration bench.
 */
export function armsAlike(control: BucketSums, variant: BucketSums): number {
  const merge = blocksOf(total(control.n), total(variant.n), control.n.length);
  if (merge === null) return 0;
  const [c, t] = [blocks(control, merge.control), blocks(variant, merge.variant)];
  const apart = Math.max(kolmogorov(c.means, t.means), kolmogorov(c.variances, t.variances));
  return Math.min(1, Math.max(0, (APART_FROM - apart) / (APART_FROM - ALIKE_UP_TO)));
}

/** How many buckets of each arm make a block, so that blocks are of one size; the smallest such, null if there is none. */
export function blocksOf(
  control: number,
  variant: number,
  buckets: number,
): { readonly control: number; readonly variant: number } | null {
  const isControlLarger = control >= variant;
  const [large, small] = isControlLarger
    ? [control / buckets, variant / buckets]
    : [variant / buckets, control / buckets];
  for (let ofLarge = 1; small > 0; ofLarge++) {
    const ofSmall = Math.round((ofLarge * large) / small);
    if (ofSmall * BLOCKS > buckets) return null;
    const isLarge = Math.min(ofLarge * large, ofSmall * small) >= BLOCK;
    if (isLarge && Math.abs(Math.log((ofLarge * large) / (ofSmall * small))) <= UNEVEN) {
      return isControlLarger ? { control: ofLarge, variant: ofSmall } : { control: ofSmall, variant: ofLarge };
    }
  }
  return null;
}

/** Mean and variance of each block, sorted; blocks of under two units are left out. */
function blocks({ n, s1, s2 }: BucketSums, merge: number): { means: Float64Array; variances: Float64Array } {
  const many = Math.floor(n.length / merge);
  const [means, variances] = [new Float64Array(many), new Float64Array(many)];
  let kept = 0;
  for (let block = 0; block < many; block++) {
    let [units, sum, squares] = [0, 0, 0];
    for (let bucket = block * merge; bucket < (block + 1) * merge; bucket++) {
      units += n[bucket] ?? 0;
      sum += s1[bucket] ?? 0;
      squares += s2[bucket] ?? 0;
    }
    if (units < 2) continue;
    const spread = squares - (sum * sum) / units;
    // What is equal must compare as equal: blocks of zeros only, whatever their number of units, are many.
    means[kept] = Math.fround(sum / units);
    variances[kept] = spread > ROUNDING * squares ? Math.fround(spread / (units - 1)) : 0;
    kept++;
  }
  return { means: means.subarray(0, kept).sort(), variances: variances.subarray(0, kept).sort() };
}

/** sup |F - G| sqrt(m n / (m + n)) of two sorted samples, ties taken together; 0 where one has nothing. */
export function kolmogorov(a: Float64Array, b: Float64Array): number {
  const [m, n] = [a.length, b.length];
  let [i, j, furthest] = [0, 0, 0];
  while (i < m && j < n) {
    const value = Math.min(a[i] ?? 0, b[j] ?? 0);
    while (i < m && (a[i] ?? 0) <= value) i++;
    while (j < n && (b[j] ?? 0) <= value) j++;
    furthest = Math.max(furthest, Math.abs(i / m - j / n));
  }
  return m === 0 || n === 0 ? 0 : furthest * Math.sqrt((m * n) / (m + n));
}

function total(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value, 0);
}
