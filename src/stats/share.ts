import { type Fraction, fraction, NANO, nearestNumber } from "../cells/index.ts";
import type { PowerSums } from "../cells/types.ts";
import type { Moments } from "./moments.ts";
import type { Absent, Level } from "./types.ts";

/** Units with the event, and all units; whole numbers. */
export interface Counts {
  readonly successes: number;
  readonly n: number;
}

/** The counts behind a proportion, whose units hold 0 or 1. */
export function counts({ n, total }: PowerSums): Counts {
  if (total === null || total % NANO !== 0n) throw new Error(`a proportion came with the total ${total} of 10^-9`);
  return { successes: Number(total / NANO), n };
}

/** k / n; n is not 0. */
export function exactShare({ successes, n }: Counts): Fraction {
  return fraction(BigInt(successes), BigInt(n));
}

/**
 * Share of units with the event, p = k / n, and the variance of that share, from the exact counts.
 *
 *   s^2 = n p (1 - p) / (n - 1)    v = s^2 / n = k (n - k) / (n^2 (n - 1))
 * @returns `no-units` without units; v 0 at 0 of n and n of n, `few-units` for one unit
 *
 * Source: Cochran 1977, Sampling Techniques, 3.2.
 */
export function share(sums: PowerSums): Level | Absent {
  const { successes, n } = counts(sums);
  if (n === 0) return { absent: "no-units" };
  const [k, size] = [BigInt(successes), BigInt(n)];
  const exact = exactShare({ successes, n });
  const variance: number | Absent =
    n < 2 ? { absent: "few-units" } : nearestNumber(fraction(k * (size - k), size * size * (size - 1n)));
  return { n, exact, value: nearestNumber(exact), variance };
}

/**
 * Moments of units that hold 0 or 1, from p exactly.
 *
 *   variance = n p (1 - p) / (n - 1)    g1 = (1 - 2p) / sqrt(p (1 - p))    g2 = (1 - 6 p (1 - p)) / (p (1 - p))
 * Without spread, at 0 of n and n of n, all but the mean is null.
 *
 * Source: Johnson, Kemp and Kotz 2005, Univariate Discrete Distributions, 3.2, with one trial.
 */
export function shareMoments(sums: PowerSums): Moments {
  const { successes, n } = counts(sums);
  if (n === 0) return { mean: null, variance: null, skewness: null, kurtosis: null };
  const [k, size] = [BigInt(successes), BigInt(n)];
  const mean = nearestNumber(fraction(k, size));
  const product = k * (size - k);
  if (product === 0n) return { mean, variance: null, skewness: null, kurtosis: null };
  return {
    mean,
    variance: nearestNumber(fraction(product, size * (size - 1n))),
    skewness: (n - 2 * successes) / Math.sqrt(nearestNumber(fraction(product, 1n))),
    kurtosis: nearestNumber(fraction(size * size - 6n * product, product)),
  };
}
