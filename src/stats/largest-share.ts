import type { ArmFigures } from "./types.ts";

/** Over 0.05 + 2 log(n) / n caution, over 0.20 + 2 log(n) / n strong; limits ours, 2 log(n) / n about a normal sample's share. */
const CAUTION_OVER = 0.05;
const STRONG_OVER = 0.2;

export interface LargestShare {
  /** Share of the sum of squares about the mean that the unit furthest from it has. */
  readonly ofSquares: number;
  /**
   * An upper bound of its share of the sum of cubes |x - mean|^3. That sum is not in power sums, but is at least each of
   * |sum (x - mean)^3|, n m2^1.5 and n m4 / |largest - mean|: the first is met by skewed, the last by heavy tails.
   */
  readonly ofCubes: number;
  readonly level: "near" | "caution" | "strong";
}

/**
 * How much of an arm's variance one single unit holds. Where the variance exists the share goes to 0 as units are added;
 * where it does not go down, no normal interval is right for any number of units.
 *
 *   max((largest - mean)^2, (smallest - mean)^2) / ((n - 1) s^2)
 * For means and ratios, of a ratio's score; a share of units has a variance always.
 * @returns null where the arm's spread does not exist
 *
 * Source: max-to-sum ratio, Embrechts, Klueppelberg and Mikosch 1997, Modelling Extremal Events, 6.2.6; bounds of the sum
 * of cubes by the inequalities of Lyapunov and Hoelder.
 */
export function largestShare(arm: ArmFigures): LargestShare | null {
  const { units: n, mean, sd, skewness, kurtosis, smallest, largest } = arm;
  if (mean === null || sd === null || sd === 0 || smallest === null || largest === null) return null;
  const furthest = Math.max(Math.abs(largest - mean), Math.abs(smallest - mean));
  // In population standard deviations: the moments below are over n.
  const far = furthest / (sd * Math.sqrt((n - 1) / n));
  const ofSquares = far ** 2 / n;
  const cubes = Math.max(Math.abs(skewness ?? 0), 1, ((kurtosis ?? -2) + 3) / far);
  const chance = (2 * Math.log(n)) / n;
  return {
    ofSquares: Math.min(1, ofSquares),
    ofCubes: Math.min(1, far ** 3 / (n * cubes)),
    level: ofSquares > STRONG_OVER + chance ? "strong" : ofSquares > CAUTION_OVER + chance ? "caution" : "near",
  };
}
