/** Ranks from 1, the smallest value, to n; null where the rank would lie outside. */
export interface Ranks {
  /** Of the quantile itself. */
  readonly at: number;
  /** Of the ends of its interval. */
  readonly low: number | null;
  readonly high: number | null;
}

/**
 * Ranks of a quantile and of the ends of its distribution-free interval, in whole numbers: no rounding moves a rank.
 *
 *   at = ceil(n q)    low = floor(n q - z h)    high = ceil(n q + z h)    h = sqrt(n q (1 - q))
 * The quantile is type 1 of Hyndman and Fan. Both ends are rounded outwards, where Conover rounds both up: with ties the
 * interval then holds at least its confidence.
 * @param n units with a value, at least 1
 * @param q the quantile as a plain decimal in (0, 1), "0.9": exact, as the plan's text has it
 * @param z the critical value, at least 0; the double is taken as the binary fraction that it is
 *
 * Source: Conover 1999, Practical Nonparametric Statistics, 3rd ed., 3.2; Hyndman and Fan 1996, The American Statistician
 * 50, 361-365.
 */
export function quantileRanks(n: number, q: string, z: number): Ranks {
  const { part, whole } = decimal(q);
  const { numerator, denominator } = binaryFraction(z);
  const middle = BigInt(n) * part; // n q, over whole
  // z h = sqrt(numerator^2 n part (whole - part)) / (denominator whole); the root only counts to the next whole number.
  const away = rootUp(numerator ** 2n * middle * (whole - part));
  const unit = denominator * whole;
  const low = middle * denominator - away;
  const high = ceiling(middle * denominator + away, unit);
  return {
    at: Number(ceiling(middle, whole)),
    low: low < unit ? null : Number(low / unit),
    high: high > BigInt(n) ? null : Number(high),
  };
}

/** The largest z whose interval still ends at this rank: |n q - rank| / h. Good to the last digits of a double. */
export function lastAtRank(n: number, q: string, rank: number): number {
  const { part, whole } = decimal(q);
  const off = BigInt(n) * part - BigInt(rank) * whole;
  return Math.abs(Number(off)) / Math.sqrt(Number(BigInt(n) * part * (whole - part)));
}

/** "0.25" as 25 of 100. */
function decimal(text: string): { part: bigint; whole: bigint } {
  const [digits = "", places = ""] = text.split(".");
  const [part, whole] = [BigInt(digits + places), 10n ** BigInt(places.length)];
  if (part <= 0n || part >= whole) throw new Error(`a quantile of ${text}`);
  return { part, whole };
}

/** A double, 0 or above, as the fraction that it is. */
function binaryFraction(value: number): { numerator: bigint; denominator: bigint } {
  let [scaled, doublings] = [value, 0];
  while (!Number.isInteger(scaled)) [scaled, doublings] = [scaled * 2, doublings + 1];
  return { numerator: BigInt(scaled), denominator: 1n << BigInt(doublings) };
}

function ceiling(value: bigint, by: bigint): bigint {
  return (value + by - 1n) / by;
}

/**
 * The smallest whole number whose square is at least the value: Newton's iteration in whole numbers, from above, begun at
 * the root of the nearest double.
 */
function rootUp(value: bigint): bigint {
  if (value < 2n) return value;
  let root = BigInt(Math.ceil(Math.sqrt(Number(value)) * (1 + 2 ** -50))) + 1n;
  for (;;) {
    const next = (root + value / root) / 2n;
    if (next >= root) return root * root === value ? root : root + 1n;
    root = next;
  }
}
