import { type Fraction, fraction, nearestNumber } from "../cells/index.ts";
import { isAbsent } from "./absent.ts";
import { differenceOf, estimateOf, spreadOf } from "./difference.ts";
import { lowerRatioLimit, upperRatioLimit } from "./ratio-limits.ts";
import type { Absent, Level, Relative } from "./types.ts";

/**
 * Relative difference, level_t / level_c - 1, with Fieller's interval.
 *
 *   all r - 1 with (level_t - r level_c)^2 <= q^2 (v_t + r^2 v_c)
 * It excludes 0 exactly when the difference's interval with the same critical value does.
 * @param q the critical value of the difference's interval, z or t
 * @returns shares of the control's level; `control-near-zero` unless level_c > q sqrt(v_c), for else the set is no
 *   interval; as the difference where an arm has no variance or neither varies
 *
 * Source: Fieller 1954, JRSS B 16, 175-185.
 */
export function relative(control: Level, variant: Level, q: number): Relative | Absent {
  const spread = spreadOf(control, variant);
  if (isAbsent(spread)) return spread;
  const halfControl = q * Math.sqrt(spread.c);
  if (!(control.value > halfControl)) return { absent: "control-near-zero" };
  const terms = {
    control: control.value,
    variant: variant.value,
    difference: estimateOf(control, variant),
    halfControl,
    halfVariant: q * Math.sqrt(spread.t),
    half: q * spread.standardError,
  };
  return {
    estimate: relativeOf(control.exact, variant.exact),
    low: lowerRatioLimit(terms),
    high: upperRatioLimit(terms),
  };
}

/**
 * The same for a difference whose interval reaches unevenly, such as the bootstrap-t's: each end has the critical value
 * that the difference's end on that side has, q = (D - low) / SE below and (high - D) / SE above.
 * @returns also `control-near-zero` where an end of the difference does not lie on its side of D
 */
export function relativeOfInterval(
  control: Level,
  variant: Level,
  { low, high }: { readonly low: number; readonly high: number },
): Relative | Absent {
  const spread = spreadOf(control, variant);
  if (isAbsent(spread)) return spread;
  const difference = estimateOf(control, variant);
  const termsOf = (half: number) => {
    const q = half / spread.standardError;
    const [halfControl, halfVariant] = [q * Math.sqrt(spread.c), q * Math.sqrt(spread.t)];
    return { control: control.value, variant: variant.value, difference, halfControl, halfVariant, half };
  };
  const [below, above] = [termsOf(difference - low), termsOf(high - difference)];
  if (!(below.half > 0 && above.half > 0)) return { absent: "control-near-zero" };
  if (!(control.value > Math.max(below.halfControl, above.halfControl))) return { absent: "control-near-zero" };
  return {
    estimate: relativeOf(control.exact, variant.exact),
    low: lowerRatioLimit(below),
    high: upperRatioLimit(above),
  };
}

/** t / c - 1: exact, rounded once. The control's level is not 0. */
export function relativeOf(c: Fraction, t: Fraction): number {
  const over = differenceOf(c, t);
  return nearestNumber(fraction(over.numerator * c.denominator, over.denominator * c.numerator));
}
