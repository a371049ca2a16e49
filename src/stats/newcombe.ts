import { nearestNumber } from "../cells/index.ts";
import { differenceOf } from "./difference.ts";
import { type Counts, exactShare } from "./share.ts";
import { type Wilson, wilson } from "./wilson.ts";

/**
 * Newcombe's score interval for the difference of two shares, variant minus control, without continuity correction.
 *
 *   low = D - sqrt((p_t - l_t)^2 + (u_c - p_c)^2)    high = D + sqrt((u_t - p_t)^2 + (p_c - l_c)^2)
 * l and u are the arms' Wilson limits at the same z. It exists for any counts with a unit in both arms, 0 of n against
 * 0 of m included, and stays within -1 and 1.
 * @param z critical value, above 0
 *
 * Source: Newcombe 1998, Statistics in Medicine 17, 873-890, method 10.
 */
export function newcombe(control: Counts, variant: Counts, z: number): { readonly low: number; readonly high: number } {
  const [c, t] = [wilson(control, z), wilson(variant, z)];
  const estimate = shareDifference(control, variant);
  return { low: estimate - reach(c, t), high: estimate + reach(t, c) };
}

/** How far the difference can move when one share rises to its upper limit and the other falls to its lower. */
export function reach(rising: Wilson, falling: Wilson): number {
  return Math.sqrt(rising.above ** 2 + falling.below ** 2);
}

/** p_t - p_c, from whole numbers. */
export function shareDifference(control: Counts, variant: Counts): number {
  return nearestNumber(differenceOf(exactShare(control), exactShare(variant)));
}
