import { type Fraction, fraction, nearestNumber } from "../cells/index.ts";
import { isAbsent } from "./absent.ts";
import { normalTwoSided } from "./normal.ts";
import type { Absent, Difference, Level, Method } from "./types.ts";

/** A difference that has its interval, and the critical value that made it. */
export interface Interval {
  readonly estimate: number;
  readonly standardError: number;
  readonly low: number;
  readonly high: number;
  readonly z: number;
  readonly p: number;
  readonly critical: number;
  /** Degrees of freedom where the critical value is t's. */
  readonly df: number | null;
}

/**
 * Difference of two levels, variant minus control, with its normal-approximation interval.
 *
 *   D = level_t - level_c    SE = sqrt(v_t + v_c)    z = D / SE    D -+ critical SE
 * @param critical above 0, of the interval: z(1 - alpha/2) for one; p is of the one difference, whatever it is
 * @returns `few-units` or `lost-digits` where an arm has no v, `zero-variance` where neither arm varies
 *
 * Source: Neyman 1923, translated in Statistical Science 5 (1990) 465-472; Imbens and Rubin 2015, ch. 6.
 */
export function difference(control: Level, variant: Level, critical: number): Interval | Absent {
  const spread = spreadOf(control, variant);
  if (isAbsent(spread)) return spread;
  const { standardError } = spread;
  const estimate = estimateOf(control, variant);
  const z = estimate / standardError;
  return { ...around(estimate, critical * standardError), standardError, z, p: normalTwoSided(z), critical, df: null };
}

/** Level of the variant minus level of the control: exact, rounded once. */
export function estimateOf(control: Level, variant: Level): number {
  return nearestNumber(differenceOf(control.exact, variant.exact));
}

/** Variant minus control as a fraction. */
export function differenceOf(c: Fraction, t: Fraction): Fraction {
  return fraction(t.numerator * c.denominator - c.numerator * t.denominator, t.denominator * c.denominator);
}

/** The variances of both levels and SE = sqrt(v_t + v_c), where they exist and one is above 0. */
export function spreadOf(
  control: Level,
  variant: Level,
): { readonly c: number; readonly t: number; readonly standardError: number } | Absent {
  const [c, t] = [control.variance, variant.variance];
  if (isAbsent(c) && isAbsent(t)) return c.absent === "few-units" ? c : t;
  if (isAbsent(c)) return c;
  if (isAbsent(t)) return t;
  const standardError = Math.sqrt(c + t);
  return standardError === 0 ? { absent: "zero-variance" } : { c, t, standardError };
}

/** The interval of half-width `half` about an estimate. */
export function around(estimate: number, half: number): Pick<Interval, "estimate" | "low" | "high"> {
  return { estimate, low: estimate - half, high: estimate + half };
}

/** The part of an interval that the report's difference holds. */
export function asDifference({ estimate, standardError, low, high, z, p }: Interval, method: Method): Difference {
  return { estimate, standardError, low, high, z, p, method };
}
