import { fraction, NANO, nearestNumber } from "../cells/index.ts";
import { moved, type OrderedArm } from "./order-statistics.ts";
import { lowerRatioLimit, type RatioTerms, upperRatioLimit } from "./ratio-limits.ts";
import { relativeOf } from "./relative.ts";
import type { Absent, Relative } from "./types.ts";

/**
 * Relative difference of two quantiles, Q_t / Q_c - 1, by MOVER for a ratio from the ends of each arm.
 *
 *   low: the smallest r with Q_t - r Q_c <= sqrt((Q_t - l_t)^2 + (r w)^2), minus 1; high likewise with u_t
 * w is u_c - Q_c for the lower end and Q_c - l_c for the upper while r is above 0; below 0 they change places, for r times
 * the control then moves the other way. An end excludes 0 exactly when the difference's does.
 * @returns `control-near-zero` unless l_c is above 0, `few-for-rank` where l_c does not exist; an end whose own ranks do
 *   not exist is null
 *
 * Source: Donner and Zou 2012, Statistical Methods in Medical Research 21, 347-359; ends of either sign: Newcombe 2016,
 * Statistical Methods in Medical Research 25, 1774-1778.
 */
export function quantileRelative(control: OrderedArm, variant: OrderedArm): Relative | Absent {
  if (control.at <= 0n) return { absent: "control-near-zero" };
  if (control.low === null) return { absent: "few-for-rank" };
  // As doubles too: an end that is nothing beside the level leaves nothing to divide by.
  if (nano(control.at - control.low) >= nano(control.at)) return { absent: "control-near-zero" };
  const c = { at: control.at, low: control.low, high: control.high };
  return {
    estimate: relativeOf(fraction(control.at, NANO), fraction(variant.at, NANO)),
    low: variant.low === null ? null : lowerEnd(c, variant.at, variant.low),
    high: variant.high === null ? null : upperEnd(c, variant.at, variant.high),
  };
}

type Control = OrderedArm & { readonly low: bigint };

function lowerEnd(c: Control, t: bigint, low: bigint): number | null {
  if (low < 0n) return lower(terms(c.at, t, c.at - c.low, t - low));
  // At l_t = 0 the ratio 0 is just not rejected, wherever the control ends.
  if (low === 0n) return -1;
  return c.high === null ? null : lower(terms(c.at, t, c.high - c.at, t - low));
}

function upperEnd(c: Control, t: bigint, high: bigint): number | null {
  if (high > 0n) return upperRatioLimit(terms(c.at, t, c.at - c.low, high - t));
  if (high === 0n) return -1;
  return c.high === null ? null : upperRatioLimit(terms(c.at, t, c.high - c.at, high - t));
}

/** Where neither arm can move, an end is the estimate: 0 over 0 by the formula when that is 0. */
function lower(of: RatioTerms): number {
  return of.half === 0 ? of.difference / of.control : lowerRatioLimit(of);
}

function terms(control: bigint, variant: bigint, halfControl: bigint, halfVariant: bigint): RatioTerms {
  const difference = variant - control;
  return {
    control: nano(control),
    variant: nano(variant),
    difference: nano(difference),
    halfControl: nano(halfControl),
    halfVariant: nano(halfVariant),
    half: moved(halfVariant, halfControl, difference),
  };
}

function nano(value: bigint): number {
  return nearestNumber(fraction(value, NANO));
}
