import { departures, type Expansion } from "./expansion.ts";
import { normalCritical } from "./normal.ts";
import { CAUTION_SHARE, type Tails } from "./tails.ts";

/** One unit with more than this share of the sum of cubes, or n under this many times g1^2: the skewness is not known. */
const CUBES_OVER = 0.05;
const UNITS_PER_SQUARE = 10;

/** What says whether an arm's skewness can be relied on. */
export interface ArmFirmness {
  readonly n: number;
  readonly skewness: number;
  /** The largest unit's share of the sum of cubes. */
  readonly ofCubes: number;
}

/**
 * From how many units on both tails are, and stay, within a fifth of the nominal tail, by pooled and by own shapes:
 * n m with a and S over sqrt(m), B and E over m, all arms growing alike. The smallest such number; a lower bound, since
 * the moments of heavy-tailed samples still grow.
 *
 *   |p h + q h^2| <= z-tail / 5 for all 0 < h <= 1 / sqrt(m)
 * with p and q the two parts of the departure at the critical value: the first crossing solves a quadratic.
 * @param units all analysed units of all arms
 * @returns null, "cannot be told from these data", where one unit of an arm holds over 5% of the sum of cubes or an arm has
 *   n < 10 g1^2
 *
 * Source: the expansion's; the limits are ours (METHODS 3).
 */
export function unitsForTails(tails: Tails, units: number, control: ArmFirmness, variant: ArmFirmness): number | null {
  if (!isFirm(control) || !isFirm(variant)) return null;
  const z = normalCritical(2 * tails.nominal);
  const limit = CAUTION_SHARE * tails.nominal;
  const { pooled, own } = tails.expansions;
  const reach = Math.min(firstCrossing(z, pooled, limit), firstCrossing(z, own, limit));
  return Math.ceil(units / reach ** 2);
}

function isFirm({ n, skewness, ofCubes }: ArmFirmness): boolean {
  return ofCubes <= CUBES_OVER && n >= UNITS_PER_SQUARE * skewness ** 2;
}

/** The smallest h > 0 at which a tail is off by the limit; infinite where none ever is. */
function firstCrossing(z: number, expansion: Expansion, limit: number): number {
  const [p, q] = departures(z, expansion);
  // The tails are off by p h + q h^2 with either sign of p, up or down: one quadratic and its mirror images.
  return Math.min(...[p, -p].flatMap((first) => [smallestRoot(first, q, limit), smallestRoot(first, q, -limit)]));
}

/** The smallest h > 0 with p h + q h^2 = to, written so that it does not cancel. */
function smallestRoot(p: number, q: number, to: number): number {
  const root = Math.sqrt(p * p + 4 * q * to);
  const roots = [(2 * to) / (p + root), (2 * to) / (p - root)].filter((h) => h > 0);
  return Math.min(...roots, Infinity);
}

/**
 * Rules of thumb, units for each arm: 355 g1^2 and 25 g1^2 with the larger g1^2 of the two arms.
 *
 * The first asks that both tails be near their nominal 2.5% for one mean; the second that a 95% interval misses at most
 * 6% of the time, both sides together. Neither knows that equal arms cancel.
 *
 * Source: Kohavi, Deng, Longbotham and Xu 2014, KDD, 1857-1866, rule 7; Cochran 1977, Sampling Techniques, 2.15, p. 42.
 */
export function unitsByRule(
  skewnessControl: number,
  skewnessVariant: number,
): { readonly kohavi: number; readonly cochran: number } {
  const square = Math.max(skewnessControl ** 2, skewnessVariant ** 2);
  return { kohavi: Math.ceil(355 * square), cochran: Math.ceil(25 * square) };
}
