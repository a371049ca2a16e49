import { fraction, NANO, nearestNumber } from "../cells/index.ts";

/** An arm's quantile and the ends of its interval, in 10^-9 of the metric's unit; an end without a rank is null. */
export interface OrderedArm {
  readonly at: bigint;
  readonly low: bigint | null;
  readonly high: bigint | null;
}

/**
 * How far the difference of two quantiles can move when one falls to its lower end and the other rises to its upper:
 * sqrt((Q - l)^2 + (u' - Q')^2), in the metric's unit. Null where an end is.
 *
 * Squares are exact whole numbers; a reach of just the estimate is just its double, so that an interval that touches 0
 * does so for the difference, the relative difference and p.
 * @param estimate the difference of the two, in 10^-9
 */
export function reach(
  falling: Pick<OrderedArm, "at" | "low">,
  rising: Pick<OrderedArm, "at" | "high">,
  estimate: bigint,
): number | null {
  if (falling.low === null || rising.high === null) return null;
  return moved(falling.at - falling.low, rising.high - rising.at, estimate);
}

/** sqrt(a^2 + b^2) of two distances in 10^-9, in the metric's unit. */
export function moved(a: bigint, b: bigint, estimate: bigint): number {
  const square = a * a + b * b;
  if (square === estimate * estimate) return Math.abs(nearestNumber(fraction(estimate, NANO)));
  return Math.sqrt(nearestNumber(fraction(square, NANO * NANO)));
}
