import { fraction, NANO, nearestNumber } from "../cells/index.ts";
import type { PowerSums } from "../cells/types.ts";
import { moments } from "./moments.ts";
import type { Absent, Level } from "./types.ts";

/**
 * Mean of the units with the variance of that mean.
 *
 *   mean = total / n    v = s^2 / n
 * @returns `no-units` without units; v as `varianceOfMean` says
 */
export function meanLevel(sums: PowerSums): Level | Absent {
  if (sums.n === 0) return { absent: "no-units" };
  if (sums.total === null) throw new Error("a mean came without its exact total");
  const exact = fraction(sums.total, BigInt(sums.n) * NANO);
  return { n: sums.n, exact, value: nearestNumber(exact), variance: varianceOfMean(sums) };
}

/**
 * v = s^2 / n, s^2 unbiased.
 *
 * Exactly 0 where no unit differs from another. `few-units` for one unit. `lost-digits` where units differ, but by less
 * than the rounding bound: a guess there would make a wrong interval.
 */
export function varianceOfMean(sums: PowerSums, noise = 0): number | Absent {
  if (sums.n < 2) return { absent: "few-units" };
  const { variance } = moments(sums, noise);
  if (variance !== null) return variance / sums.n;
  return sums.smallest === sums.largest ? 0 : { absent: "lost-digits" };
}
