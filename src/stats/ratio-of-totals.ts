import { fraction, NANO, nearestNumber } from "../cells/index.ts";
import type { Arm, PowerSums } from "../cells/types.ts";
import { varianceOfMean } from "./mean.ts";
import type { Absent, Level } from "./types.ts";

type Ratio = Extract<Arm, { readonly kind: "ratio" }>;

/**
 * Ratio of two totals over the same units, with its variance by linearisation.
 *
 *   R = sum a / sum b    d = (a - R b) / mean(b)    v = s_d^2 / n
 * d has the mean 0 by construction, so its variance about 0 and about its mean are one.
 * @returns `no-units` without units, `zero-denominator` where the b sum to 0; v absent as `varianceOfMean` says
 *
 * Source: Cochran 1977, Sampling Techniques, 6.3-6.4 (eq. 6.13 without the finite population); Deng, Knoblich and Lu
 * 2018, KDD, 233-242.
 */
export function ratioOfTotals(arm: Ratio): Level | Absent {
  const { numerator, denominator, score } = arm;
  const n = numerator.n;
  if (n === 0) return { absent: "no-units" };
  if (numerator.total === null || denominator.total === null) throw new Error("a ratio came without its exact totals");
  if (denominator.total === 0n || score === null) return { absent: "zero-denominator" };
  const exact = fraction(numerator.total, denominator.total);
  return { n, exact, value: nearestNumber(exact), variance: varianceOfMean(score, scoreNoise(arm)) };
}

/**
 * How far a score can be off, for it is computed in doubles from a, b, R and mean(b), each rounded once:
 *
 *   |error| <= eps ((|a| + 3 |R b|) / |mean b| + 3 |d|) <= 6 eps (|a| + |R b|) / |mean b|,   eps = 2^-53
 * Without this bound, units that all have one ratio would show the noise of a - R b as their spread.
 */
export function scoreNoise({ numerator, denominator, score }: Ratio): number {
  if (numerator.total === null || !denominator.total || score === null) return 0;
  const ratio = nearestNumber(fraction(numerator.total, denominator.total));
  const meanOfB = nearestNumber(fraction(denominator.total, BigInt(denominator.n) * NANO));
  return (6 * 2 ** -53 * (reach(numerator) + Math.abs(ratio) * reach(denominator))) / Math.abs(meanOfB);
}

function reach({ smallest, largest }: PowerSums): number {
  return Math.max(Math.abs(smallest ?? 0), Math.abs(largest ?? 0));
}
