import type { ShapedArm } from "./expansion.ts";
import { normalTwoSided } from "./normal.ts";
import { root } from "./root.ts";
import { narrowed, skewCorrection, skewCorrectionAt, transformed, untransformed, widened } from "./skew-correction.ts";
import type { Absent, Relative } from "./types.ts";

/** The difference with its skew-corrected interval. */
export interface SkewCorrected {
  readonly low: number;
  readonly high: number;
  /** Two-sided: the alpha at which the interval touches 0. */
  readonly p: number;
  /** The skewness of the estimate that was corrected for. */
  readonly skew: number;
}

/**
 * Interval of the difference, corrected for the skewness of its estimate.
 *
 *   [D - SE q(z + R(z)), D - SE q(-z - R(z))], q the inverse of g; p = 2 Phi(-z') with z' + R(z') = |g(D / SE)|
 * @param estimate D
 * @param z the critical value
 * @param alike how far the arms look like one distribution, 1 to 0 (`armsAlike`); 0 where that is not known
 * @returns `zero-variance` where neither arm varies
 *
 * Source: as `skewCorrection`.
 */
export function skewCorrected(
  control: ShapedArm,
  variant: ShapedArm,
  estimate: number,
  z: number,
  alike: number,
): SkewCorrected | Absent {
  const standardError = Math.sqrt(control.variance + variant.variance);
  if (standardError === 0) return { absent: "zero-variance" };
  const correction = skewCorrection(control, variant, alike);
  const reach = widened(z, correction);
  return {
    low: estimate - standardError * untransformed(reach, correction),
    high: estimate - standardError * untransformed(-reach, correction),
    p: normalTwoSided(narrowed(Math.abs(transformed(estimate / standardError, correction)), correction)),
    skew: correction.skew,
  };
}

/** Angles looked at on each side; between two of them the test is taken to change once. */
const STEPS = 256;

/**
 * Relative difference with the skew-corrected interval: all r - 1 for which level_t - r level_c is not rejected.
 *
 *   |g_r(T_r)| <= z + R_r(z),   T_r = (level_t - r level_c) / sqrt(v_t + r^2 v_c)
 * The r about the estimate that hang together; at r = 1 it is the difference's own test, so both exclude 0 together. r runs
 * through all numbers as rho tan(angle), so that an end that is never met is known to be unbounded.
 * @param levels of the arms; `difference` is their exact difference, not recomputed from the rounded levels
 * @returns an unbounded end is null; `control-near-zero` where the control's level is not above 0 or neither end is bounded
 *
 * Source: Fieller 1954, JRSS B 16, 175-185, for the set; the test is `skewCorrected`'s.
 */
export function skewCorrectedRelative(
  control: ShapedArm,
  variant: ShapedArm,
  levels: { readonly control: number; readonly difference: number },
  z: number,
  alike: number,
): Relative | Absent {
  if (control.variance + variant.variance === 0) return { absent: "zero-variance" };
  if (!(levels.control > 0)) return { absent: "control-near-zero" };
  const estimate = levels.difference / levels.control;
  const scale = scaleOf(control, variant, estimate);
  const test = testOfRatio(control, variant, levels, z, alike);
  const excess = (angle: number) => test(scale * Math.tan(angle)).excess;
  const middle = middleOf((angle) => test(scale * Math.tan(angle)).signed, excess, Math.atan((1 + estimate) / scale));
  if (middle === null) return { absent: "control-near-zero" };

  const one = Math.atan(1 / scale);
  const isOneKept = test(1).excess <= 0;
  const side = (towards: -1 | 1): number | null => {
    // The test at 1 is the difference's. Where it does not reject, no end lies between the middle and 1.
    const isTowardsOne = (one - middle) * towards > 0;
    const end = firstOutside(excess, isTowardsOne && isOneKept ? one : middle, towards);
    if (!isTowardsOne) return end === null ? null : scale * Math.tan(end) - 1;
    if (isOneKept) return end === null ? null : Math.max(0, (scale * Math.tan(end) - 1) * towards) * towards;
    // A root next to 1 may lie a rounding beyond it.
    return Math.min(-Number.EPSILON, end === null ? 0 : (scale * Math.tan(end) - 1) * towards) * towards;
  };
  const [low, high] = [side(-1), side(1)];
  return low === null && high === null ? { absent: "control-near-zero" } : { estimate, low, high };
}

/** g_r(T_r), and by how much its size is above the critical value. */
function testOfRatio(
  control: ShapedArm,
  variant: ShapedArm,
  levels: { readonly control: number; readonly difference: number },
  z: number,
  alike: number,
): (r: number) => { readonly signed: number; readonly excess: number } {
  return (r) => {
    const gap = levels.difference - (r - 1) * levels.control;
    const total = variant.variance + r * r * control.variance;
    // A variant without spread at r = 0: known to be off, unless it is met exactly.
    if (total === 0) return { signed: gap, excess: gap === 0 ? -z : Infinity };
    const correction = skewCorrectionAt(r, control, variant, alike);
    const signed = transformed(gap / Math.sqrt(total), correction);
    return { signed, excess: Math.abs(signed) - widened(z, correction) };
  };
}

/** An angle that is not rejected: the estimate's, or where it is moved beyond the critical value, the one that is moved to 0. */
function middleOf(
  signed: (angle: number) => number,
  excess: (angle: number) => number,
  estimate: number,
): number | null {
  if (excess(estimate) <= 0) return estimate;
  const towards = signed(estimate) > 0 ? 1 : -1;
  let before = estimate;
  for (const angle of anglesFrom(estimate, towards)) {
    if (signed(angle) * towards <= 0) return root(signed, before, angle);
    before = angle;
  }
  return null;
}

/** The first angle from one that is not rejected on at which the test rejects; null where it never does. */
function firstOutside(excess: (angle: number) => number, start: number, towards: -1 | 1): number | null {
  let inside = start;
  for (const angle of anglesFrom(start, towards)) {
    // At the start it may be a rounding above 0, where the critical value is met exactly.
    if (excess(angle) > 0) return excess(inside) >= 0 ? inside : root(excess, inside, angle);
    inside = angle;
  }
  return null;
}

function anglesFrom(start: number, towards: -1 | 1): number[] {
  const stop = (towards * Math.PI) / 2;
  return Array.from({ length: STEPS }, (_, i) => start + ((stop - start) * (i + 1)) / (STEPS + 1));
}

/** rho: where the variances of both levels weigh alike, or the ratio itself where one of them is 0. */
function scaleOf(control: ShapedArm, variant: ShapedArm, estimate: number): number {
  const balance = Math.sqrt(variant.variance / control.variance);
  return Number.isFinite(balance) && balance > 0 ? balance : Math.max(Math.abs(1 + estimate), 1);
}
