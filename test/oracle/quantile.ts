import { ascending, readDecimal } from "./number.ts";

/**
 * Quantiles of two arms by METHODS 1, from the values themselves: ranks by trying them, p by trying every z at which a rank
 * changes, ends of the ratio by halving. Slow and plain, for the few values of a random log.
 */

/** In 10^-9; an end whose rank the arm does not have is null. */
export interface OracleQuantile {
  readonly at: bigint;
  readonly low: bigint | null;
  readonly high: bigint | null;
}

export interface OracleQuantileContrast {
  readonly estimate: number;
  readonly low: number | null;
  readonly high: number | null;
  /** Null where no end has a width in either arm. */
  readonly p: number | null;
  readonly relative: { readonly estimate: number; readonly low: number | null; readonly high: number | null } | null;
}

/** R 4.2.2, qnorm(1 - 0.05 / 2 / k), for k intervals that hold at once. */
const Z: readonly string[] = ["1.959963984540054", "2.241402727604947"];

export function zFor(intervals: number): string {
  const z = Z[intervals - 1];
  if (z === undefined) throw new Error(`no z for ${intervals} intervals`);
  return z;
}

/** Q at ceil(n q), the ends at floor(n q - z h) and ceil(n q + z h), h^2 = n q (1 - q); all in whole numbers. */
export function orderedArm(values: readonly bigint[], q: string, z: string): OracleQuantile | null {
  if (values.length === 0) return null;
  const sorted = [...values].sort(ascending);
  const [share, one] = fractionOf(q);
  const [numerator, denominator] = fractionOf(z);
  const n = BigInt(sorted.length);
  const middle = n * share;
  // rank <= n q - z h: n q - rank >= 0 and its square at least z^2 h^2; everything over one, and z over its denominator.
  const reach = numerator ** 2n * middle * (one - share);
  const isBeyond = (distance: bigint) => distance >= 0n && (distance * denominator) ** 2n >= reach;
  const ranks = sorted.map((_, i) => BigInt(i + 1));
  const at = ranks.find((rank) => rank * one >= middle);
  const low = ranks.filter((rank) => isBeyond(middle - rank * one)).at(-1);
  const high = ranks.find((rank) => isBeyond(rank * one - middle));
  const valueAt = (rank: bigint | undefined) => (rank === undefined ? null : (sorted[Number(rank) - 1] ?? null));
  const quantile = valueAt(at);
  if (quantile === null) throw new Error(`no quantile ${q} of ${n} values`);
  return { at: quantile, low: valueAt(low), high: valueAt(high) };
}

export function contrastOfQuantiles(
  control: readonly bigint[],
  variant: readonly bigint[],
  q: string,
  z: string,
): OracleQuantileContrast | null {
  const [c, t] = [orderedArm(control, q, z), orderedArm(variant, q, z)];
  if (c === null || t === null) return null;
  const estimate = Number(t.at - c.at) / 1e9;
  if (isPoint(c) && isPoint(t)) return { estimate, low: null, high: null, p: null, relative: null };
  const down = moved(t, c);
  const up = moved(c, t);
  return {
    estimate,
    low: down === null ? null : estimate - Math.sqrt(Number(down)) / 1e9,
    high: up === null ? null : estimate + Math.sqrt(Number(up)) / 1e9,
    p: pOf(control, variant, q),
    relative: relativeOf(c, t),
  };
}

const isPoint = ({ at, low, high }: OracleQuantile): boolean => low === at && high === at;

/** (Q - l)^2 + (u' - Q')^2, of the arm that falls and the one that rises. */
function moved(falling: OracleQuantile, rising: OracleQuantile): bigint | null {
  if (falling.low === null || rising.high === null) return null;
  return (falling.at - falling.low) ** 2n + (rising.high - rising.at) ** 2n;
}

/**
 * The ends only move where n q -+ z h is a whole number, so the largest z at which the interval excludes 0 is one of these.
 * @returns 1 where no z excludes 0
 */
function pOf(control: readonly bigint[], variant: readonly bigint[], q: string): number {
  const share = Number(q);
  const steps = [control, variant].flatMap(({ length: n }) =>
    Array.from({ length: n + 2 }, (_, rank) => Math.abs(rank - n * share) / Math.sqrt(n * share * (1 - share))),
  );
  // Between two steps nothing changes: one z inside each of the gaps stands for all of it, and for its upper end.
  const ends = [0, ...steps].sort((a, b) => a - b);
  const gaps = ends.flatMap((to, i) => {
    const from = ends[i - 1] ?? 0;
    return to - from > 1e-9 ? [{ to, inside: ((from + to) / 2).toFixed(15) }] : [];
  });
  const excluding = gaps.filter(({ inside }) => {
    const [c, t] = [orderedArm(control, q, inside), orderedArm(variant, q, inside)];
    if (c === null || t === null || c.at === t.at) return false;
    const reach = t.at > c.at ? moved(t, c) : moved(c, t);
    if (reach === null || reach >= (t.at - c.at) ** 2n) return false;
    // As doubles too: an interval that stays clear of 0 only beyond their digits touches it.
    return Math.sqrt(Number(reach)) < Math.abs(Number(t.at - c.at));
  });
  return 2 * upperTail(Math.max(0, ...excluding.map(({ to }) => to)));
}

/** P(Z > z), 0 <= z <= 40: the density over 40 standard deviations by Simpson's rule, to about 1e-13 of itself. */
function upperTail(z: number): number {
  const width = 1 / 512;
  const density = (x: number) => Math.exp(-(x * x - z * z) / 2);
  let sum = 0;
  for (let i = 0; i <= 8192; i++) sum += density(z + i * width) * (i === 0 || i === 8192 ? 1 : i % 2 === 1 ? 4 : 2);
  return ((sum * width) / 3 / Math.sqrt(2 * Math.PI)) * Math.exp((-z * z) / 2);
}

/**
 * r with Q_t - r Q_c = sqrt((Q_t - l_t)^2 + (r w)^2), minus 1, for the lower end, w = u_c - Q_c for r above 0 and Q_c - l_c
 * below; the upper end turned round. Null where l_c is not above 0, or not beside Q_c
 * as doubles hold them, or not there.
 */
function relativeOf(c: OracleQuantile, t: OracleQuantile): OracleQuantileContrast["relative"] {
  if (c.low === null || c.low <= 0n) return null;
  const [center, at] = [Number(c.at), Number(t.at)];
  const below = Number(c.at - c.low);
  if (below >= center) return null;
  const above = c.high === null ? null : Number(c.high - c.at);
  const gap = (r: number, side: 1 | -1, half: number, w: number) =>
    side * (at - r * center) - Math.sqrt(half ** 2 + (r * w) ** 2);
  const end = (side: 1 | -1, own: bigint | null): number | null => {
    if (own === null) return null;
    const half = Math.abs(Number(own - t.at));
    const isBeforeZero = side === 1 ? own > 0n : own < 0n;
    const w = isBeforeZero ? above : below;
    if (own === 0n) return -1;
    if (w === null) return null;
    // The gap falls with r for the lower end and grows with it for the upper, from one sign to the other.
    let [near, far] = [at / center, isBeforeZero ? 0 : at / center - side];
    while (!isBeforeZero && gap(far, side, half, w) < 0) far = near + 2 * (far - near);
    for (let i = 0; i < 200; i++) {
      const middle = (near + far) / 2;
      if (gap(middle, side, half, w) < 0) near = middle;
      else far = middle;
    }
    return near - 1;
  };
  return { estimate: at / center - 1, low: end(1, t.low), high: end(-1, t.high) };
}

/** A plain decimal as a fraction of whole numbers. */
function fractionOf(text: string): readonly [bigint, bigint] {
  const value = readDecimal(text);
  if (value === null || value.sign < 0) throw new Error(`not a decimal above 0: ${text}`);
  const places = Math.max(0, value.digits.length - 1 - value.lead);
  return [
    BigInt(value.digits || "0") * 10n ** BigInt(places + value.lead - value.digits.length + 1),
    10n ** BigInt(places),
  ];
}
