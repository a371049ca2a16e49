import { fraction, NANO, nearestNumber } from "../cells/index.ts";
import type { PowerSums } from "../cells/types.ts";
import { sumBounds } from "./rounding.ts";

/** Mean and shape of one group; what does not exist, or is lost in rounding, is null and never 0 or negative. */
export interface Moments {
  /** In the metric's unit. */
  readonly mean: number | null;
  /** Unbiased, in the metric's unit squared. */
  readonly variance: number | null;
  /** g1, without unit. */
  readonly skewness: number | null;
  /** g2, the excess over the normal distribution's, without unit. */
  readonly kurtosis: number | null;
}

type Four = PowerSums["powers"];

/** One in the units of a power sum. */
const ONE = 1n << 120n;

/**
 * Mean, variance, skewness and kurtosis from power sums.
 *
 *   m_k = sum (x - mean)^k / n    variance = n m2 / (n - 1)    g1 = m3 / m2^1.5    g2 = m4 / m2^2 - 3
 * All in exact integers, each turned into a double once: nothing cancels however far the mean lies from the pivot. A
 * central moment that is not above the bound of the roundings in its sums is absent, and what is made from it.
 * g1 and g2 are the plain moments of the sample, not corrected for its size.
 * @param noise how far each x can be off besides its own rounding, in the metric's unit
 *
 * Source: Kendall and Stuart 1969, The Advanced Theory of Statistics 1, 3.7; Joanes and Gill 1998, The Statistician 47,
 * 183-189, g1 and g2.
 */
export function moments(sums: PowerSums, noise = 0): Moments {
  if (sums.n === 0) return { mean: null, variance: null, skewness: null, kurtosis: null };
  const n = BigInt(sums.n);
  const [m2, m3, m4] = centralMoments(sums, noise);
  const square = sums.scale * sums.scale;
  return {
    mean: mean(sums),
    variance: m2 === null || n < 2n ? null : nearestNumber(fraction(m2, n * (n - 1n) * ONE * ONE)) * square,
    skewness: m2 === null || m3 === null ? null : sign(m3) * Math.sqrt(nearestNumber(fraction(m3 * m3, m2 * m2 * m2))),
    kurtosis: m2 === null || m4 === null ? null : nearestNumber(fraction(m4 - 3n * m2 * m2, m2 * m2)),
  };
}

/** The exact total over n; where there is none, as for a score, the first power sum's. */
function mean({ n, total, powers, pivot, scale }: PowerSums): number {
  if (total !== null) return nearestNumber(fraction(total, BigInt(n) * NANO));
  return Number(pivot) + nearestNumber(fraction(powers[0], BigInt(n) * ONE)) * scale;
}

/** m_k of u, times (n 2^120)^k: whole numbers. Null where not above the rounding bound. */
function centralMoments(sums: PowerSums, noise: number): [bigint | null, bigint | null, bigint | null] {
  const n = BigInt(sums.n);
  const sizes = each(sums.powers, (s) => (s < 0n ? -s : s));
  const bounds = sumBounds(sums, noise / sums.scale);
  const reached: Four = [sizes[0] + bounds[0], sizes[1] + bounds[1], sizes[2] + bounds[2], sizes[3] + bounds[3]];

  const values = central(n, sums.powers, -1n);
  // The polynomials with all signs positive: how much they can move when each sum moves by its bound.
  const least = central(n, sizes, 1n);
  const most = central(n, reached, 1n);
  const kept = (k: 0 | 1 | 2) => {
    const size = k === 1 && values[k] < 0n ? -values[k] : values[k];
    return size > most[k] - least[k] ? values[k] : null;
  };
  return [kept(0), kept(1), kept(2)];
}

/**
 *   n^2 m2 = n S2 - S1^2
 *   n^3 m3 = n^2 S3 - 3 n S1 S2 + 2 S1^3
 *   n^4 m4 = n^3 S4 - 4 n^2 S1 S3 + 6 n S1^2 S2 - 3 S1^4
 * with every product of j sums in units of 2^-(120 j); `minus` is -1 for the moments, 1 for their bounds.
 */
function central(n: bigint, [s1, s2, s3, s4]: Four, minus: -1n | 1n): [bigint, bigint, bigint] {
  const p2 = n * ONE * s2;
  const p3 = n * n * ONE * ONE * s3;
  const p4 = n * n * n * ONE * ONE * ONE * s4;
  return [
    p2 + minus * s1 * s1,
    p3 + minus * 3n * s1 * p2 + 2n * s1 * s1 * s1,
    p4 + minus * 4n * s1 * p3 + 6n * s1 * s1 * p2 + minus * 3n * s1 * s1 * s1 * s1,
  ];
}

function each(four: Four, change: (value: bigint) => bigint): Four {
  return [change(four[0]), change(four[1]), change(four[2]), change(four[3])];
}

function sign(value: bigint): number {
  return value < 0n ? -1 : 1;
}
