import { divideRounded } from "./nano.ts";

/** Values of one power-of-two class of |x|; class null holds the zeros. In 10^-9 of the metric's unit. */
export interface PowerClass {
  readonly powerOfTwo: number | null;
  readonly n: bigint;
  readonly total: bigint;
  readonly least: bigint;
  readonly most: bigint;
}

/**
 * What values are measured against: u = (x - pivot) / scale.
 *
 * The pivot is the mean of the bulk, rounded to 9 places: classes from the top are dropped while together they hold at most
 * one unit, or 1 in 1,000 where that is more. A mean with an outlier in it would cancel the rest away. The last class
 * stays. The scale is the smallest power of two that is not under max |x - pivot|, 1 when that is 0.
 * @returns pivot in 10^-9 of the metric's unit; both fixed by exact sums, so the same for any order of rows
 */
export function pivotAndScale(classes: readonly PowerClass[]): { pivot: bigint; scale: number } {
  if (classes.length === 0) return { pivot: 0n, scale: 1 };
  const ordered = [...classes].sort(
    (a, b) => (a.powerOfTwo ?? Number.NEGATIVE_INFINITY) - (b.powerOfTwo ?? Number.NEGATIVE_INFINITY),
  );
  const all = ordered.reduce((n, c) => n + c.n, 0n);
  const spared = all / 1000n > 1n ? all / 1000n : 1n;
  let dropped = 0n;
  let kept = ordered.length;
  for (let i = ordered.length - 1; i > 0; i--) {
    dropped += ordered[i]?.n ?? 0n;
    if (dropped > spared) break;
    kept = i;
  }
  const bulk = ordered.slice(0, kept);
  const pivot = divideRounded(
    bulk.reduce((sum, c) => sum + c.total, 0n),
    bulk.reduce((n, c) => n + c.n, 0n),
  );
  const reach = ordered.reduce((far, c) => larger(far, larger(distance(c.least, pivot), distance(c.most, pivot))), 0n);
  return { pivot, scale: powerOfTwoOver(reach) };
}

/** The smallest power of two that is not under a number of 10^-9; 1 for 0. */
export function powerOfTwoOver(nano: bigint): number {
  if (nano === 0n) return 1;
  let exponent = 0;
  while (2n ** BigInt(exponent) * 1_000_000_000n < nano) exponent += 1;
  // Under 1: halve while half of it still reaches; 2^-k * 10^9 >= nano is 10^9 >= nano * 2^k.
  if (exponent === 0) while (1_000_000_000n >= nano * 2n ** BigInt(1 - exponent)) exponent -= 1;
  return 2 ** exponent;
}

/** The same for a double. */
export function scaleOver(reach: number): number {
  if (reach === 0) return 1;
  const guess = 2 ** Math.ceil(Math.log2(reach));
  if (guess < reach) return guess * 2;
  return guess / 2 >= reach ? guess / 2 : guess;
}

const distance = (a: bigint, b: bigint) => (a < b ? b - a : a - b);
const larger = (a: bigint, b: bigint) => (a < b ? b : a);
