import type { Arm } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { armFigures } from "./arm-figures.ts";
import { asDifference, difference, estimateOf, spreadOf } from "./difference.ts";
import { fewEvents, hasFewEvents } from "./few-events.ts";
import { level } from "./level.ts";
import { newcombe } from "./newcombe.ts";
import { normalUpperTail } from "./normal.ts";
import { quantilesCompared } from "./quantile-arms.ts";
import { relative, relativeOf } from "./relative.ts";
import { shapedArm } from "./shaped-arm.ts";
import { type Counts, counts } from "./share.ts";
import { skewCorrected, skewCorrectedRelative } from "./skew-corrected.ts";
import type { Absent, Contrast, Level, Method } from "./types.ts";
import { welch } from "./welch.ts";

/** Means and ratios with fewer units than this in an arm are compared by Welch's t; the limit is ours. */
const SMALL_ARM = 200;

/** Asks for the skew-corrected interval: how far the arms look like one distribution, 1 to 0 (`armsAlike`). */
export interface Alike {
  readonly alike: number;
}

type Compared = Omit<Contrast, "control" | "variant">;

/**
 * One metric, one variant against the control: difference, relative difference and p by one method, so that they agree
 * about 0, and the intervals that stand beside.
 *
 * Which method counts, first that applies: order statistics (a quantile), score (a proportion with under 10 successes or
 * failures in an arm), skew-corrected (where it is asked for and the arms' shapes are known), Welch (means, adjusted or not,
 * and ratios with under 200 units in an arm), normal.
 * @param critical above 0, on the normal's scale, of one contrast or of several at once: low and high are held at it, and
 *   Welch takes t(df) at the same tail; z and p are of this contrast alone
 * @param corrected asks for the skew-corrected interval
 */
export function contrast(control: Arm, variant: Arm, critical: number, corrected: Alike | null = null): Contrast {
  return {
    control: armFigures(control),
    variant: armFigures(variant),
    ...compared(control, variant, critical, corrected),
  };
}

function compared(control: Arm, variant: Arm, critical: number, corrected: Alike | null): Compared {
  if (control.kind === "quantile" && variant.kind === "quantile") {
    const { difference, relative, why } = quantilesCompared(control, variant, critical);
    return { difference, relative, critical, df: null, why, beside: [] };
  }
  const [c, t] = [level(control), level(variant)];
  const [ofControl, ofVariant] = [countsOf(control), countsOf(variant)];
  const isShare = ofControl !== null && ofVariant !== null;
  const few = isShare && (hasFewEvents(ofControl) || hasFewEvents(ofVariant));
  const small = !isShare && !isAdjustedShare(control) && Math.min(units(control), units(variant)) < SMALL_ARM;
  const method = few ? "score" : small ? "welch" : "normal";

  if (isAbsent(c) || isAbsent(t)) {
    const absents = [c, t].filter(isAbsent);
    const why = absents.find(({ absent }) => absent === "no-units") ?? absents[0] ?? { absent: "no-units" };
    return withoutInterval(null, method, why, critical);
  }
  if (few) return byScore(c, t, ofControl, ofVariant, critical);
  const plain = small
    ? byWelch(c, t, critical)
    : byNormal(c, t, isShare ? { control: ofControl, variant: ofVariant } : null, critical);
  return corrected === null ? plain : (byCorrection(control, variant, c, t, plain, critical, corrected.alike) ?? plain);
}

/**
 * The same contrast by a method of the reader's choice, whatever the arms' sizes: what other reasonable methods would say.
 * @returns null where the method is not one for these arms: score is for proportions, Welch's t for all others, and a
 *   quantile has none but its own
 */
export function contrastBy(
  method: Exclude<Method, "skew-corrected" | "quantile">,
  control: Arm,
  variant: Arm,
  critical: number,
): Pick<Contrast, "difference" | "relative" | "why"> | null {
  if (control.kind === "quantile" || variant.kind === "quantile") return null;
  const [c, t] = [level(control), level(variant)];
  const [ofControl, ofVariant] = [countsOf(control), countsOf(variant)];
  const isShare = (ofControl !== null && ofVariant !== null) || isAdjustedShare(control);
  if (isShare ? method === "welch" : method === "score") return null;
  if (isAbsent(c) || isAbsent(t)) return null;
  if (method === "welch") return byWelch(c, t, critical);
  if (method === "normal") return byNormal(c, t, null, critical);
  return ofControl === null || ofVariant === null ? null : byScore(c, t, ofControl, ofVariant, critical);
}

function byNormal(
  c: Level,
  t: Level,
  shares: { readonly control: Counts; readonly variant: Counts } | null,
  critical: number,
): Compared {
  const found = difference(c, t, critical);
  if (isAbsent(found)) return withoutInterval(estimateOf(c, t), "normal", found, critical);
  return {
    difference: asDifference(found, "normal"),
    relative: relative(c, t, found.critical),
    critical: found.critical,
    df: null,
    why: null,
    beside: shares === null ? [] : [{ method: "score", ...newcombe(shares.control, shares.variant, found.critical) }],
  };
}

function byWelch(c: Level, t: Level, critical: number): Compared {
  const found = welch(c, t, 2 * normalUpperTail(critical));
  const plain = difference(c, t, critical);
  if (isAbsent(found)) return withoutInterval(estimateOf(c, t), "welch", found, critical);
  return {
    difference: asDifference(found, "welch"),
    relative: relative(c, t, found.critical),
    critical: found.critical,
    df: found.df,
    why: null,
    beside: isAbsent(plain) ? [] : [{ method: "normal", low: plain.low, high: plain.high }],
  };
}

/**
 * The skew-corrected difference, relative difference and p; beside it what would count without. z is D / SE as before.
 * @returns null where the arms' shapes are not known
 */
function byCorrection(
  control: Arm,
  variant: Arm,
  c: Level,
  t: Level,
  plain: Compared,
  critical: number,
  alike: number,
): Compared | null {
  const [ofControl, ofVariant] = [shapedArm(control), shapedArm(variant)];
  const { estimate, standardError, low, high, z, method } = plain.difference;
  if (isAbsent(ofControl) || isAbsent(ofVariant) || estimate === null || low === null || high === null) return null;
  const found = skewCorrected(ofControl, ofVariant, estimate, critical, alike);
  if (isAbsent(found)) return null;
  const levels = { control: c.value, difference: estimateOf(c, t) };
  const ofRatio = skewCorrectedRelative(ofControl, ofVariant, levels, critical, alike);
  return {
    difference: { estimate, standardError, low: found.low, high: found.high, z, p: found.p, method: "skew-corrected" },
    relative: isAbsent(ofRatio) ? ofRatio : { ...ofRatio, estimate: relativeOf(c.exact, t.exact) },
    critical,
    df: null,
    why: null,
    beside: [{ method, low, high }, ...plain.beside],
  };
}

/** The score interval exists wherever both arms have a unit; its standard error is the plain one, where that does. */
function byScore(c: Level, t: Level, control: Counts, variant: Counts, critical: number): Compared {
  const found = fewEvents(control, variant, critical);
  const plain = difference(c, t, critical);
  const spread = spreadOf(c, t);
  return {
    difference: {
      estimate: found.estimate,
      standardError: isAbsent(spread) ? null : spread.standardError,
      low: found.low,
      high: found.high,
      z: null,
      p: found.p,
      method: "score",
    },
    relative: found.relative,
    critical,
    df: null,
    why: null,
    beside: isAbsent(plain) ? [] : [{ method: "normal", low: plain.low, high: plain.high }],
  };
}

/** The estimate stands where there is one; nothing else does. */
function withoutInterval(estimate: number | null, method: Method, why: Absent, critical: number): Compared {
  return {
    difference: { estimate, standardError: null, low: null, high: null, z: null, p: null, method },
    relative: why,
    critical,
    df: null,
    why,
    beside: [],
  };
}

function countsOf(arm: Arm): Counts | null {
  return arm.kind === "proportion" ? counts(arm.sums) : null;
}

function isAdjustedShare(arm: Arm): boolean {
  return arm.kind === "adjusted" && arm.summary === "proportion";
}

function units(arm: Arm): number {
  return arm.kind === "ratio" ? arm.numerator.n : arm.sums.n;
}
