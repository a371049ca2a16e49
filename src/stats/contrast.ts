import type { Arm } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { armFigures } from "./arm-figures.ts";
import { asDifference, difference, estimateOf, spreadOf } from "./difference.ts";
import { fewEvents, hasFewEvents } from "./few-events.ts";
import { level } from "./level.ts";
import { newcombe } from "./newcombe.ts";
import { normalCritical } from "./normal.ts";
import { relative } from "./relative.ts";
import { type Counts, counts } from "./share.ts";
import type { Absent, Contrast, Level, Method } from "./types.ts";
import { welch } from "./welch.ts";

/** Means and ratios with fewer units than this in an arm are compared by Welch's t; the limit is ours. */
const SMALL_ARM = 200;

type Compared = Omit<Contrast, "control" | "variant">;

/**
 * One metric, one variant against the control: difference, relative difference and p by one method, so that they agree
 * about 0, and the intervals that stand beside.
 *
 * Which method counts, first that applies: score (a proportion with under 10 successes or failures in an arm), Welch
 * (means and ratios with under 200 units in an arm), normal.
 * @param alpha in (0, 1): low and high are held at it, whatever number of contrasts it was divided by; z and p are of
 *   this contrast alone
 */
export function contrast(control: Arm, variant: Arm, alpha: number): Contrast {
  return { control: armFigures(control), variant: armFigures(variant), ...compared(control, variant, alpha) };
}

function compared(control: Arm, variant: Arm, alpha: number): Compared {
  const [c, t] = [level(control), level(variant)];
  const [ofControl, ofVariant] = [countsOf(control), countsOf(variant)];
  const isShare = ofControl !== null && ofVariant !== null;
  const few = isShare && (hasFewEvents(ofControl) || hasFewEvents(ofVariant));
  const small = !isShare && Math.min(units(control), units(variant)) < SMALL_ARM;
  const method = few ? "score" : small ? "welch" : "normal";

  if (isAbsent(c) || isAbsent(t)) {
    const absents = [c, t].filter(isAbsent);
    const why = absents.find(({ absent }) => absent === "no-units") ?? absents[0] ?? { absent: "no-units" };
    return withoutInterval(null, method, why, alpha);
  }
  if (few) return byScore(c, t, ofControl, ofVariant, alpha);
  if (small) return byWelch(c, t, alpha);
  return byNormal(c, t, isShare ? { control: ofControl, variant: ofVariant } : null, alpha);
}

function byNormal(
  c: Level,
  t: Level,
  shares: { readonly control: Counts; readonly variant: Counts } | null,
  alpha: number,
): Compared {
  const found = difference(c, t, alpha);
  if (isAbsent(found)) return withoutInterval(estimateOf(c, t), "normal", found, alpha);
  return {
    difference: asDifference(found, "normal"),
    relative: relative(c, t, found.critical),
    critical: found.critical,
    df: null,
    why: null,
    beside: shares === null ? [] : [{ method: "score", ...newcombe(shares.control, shares.variant, found.critical) }],
  };
}

function byWelch(c: Level, t: Level, alpha: number): Compared {
  const found = welch(c, t, alpha);
  const plain = difference(c, t, alpha);
  if (isAbsent(found)) return withoutInterval(estimateOf(c, t), "welch", found, alpha);
  return {
    difference: asDifference(found, "welch"),
    relative: relative(c, t, found.critical),
    critical: found.critical,
    df: found.df,
    why: null,
    beside: isAbsent(plain) ? [] : [{ method: "normal", low: plain.low, high: plain.high }],
  };
}

/** The score interval exists wherever both arms have a unit; its standard error is the plain one, where that does. */
function byScore(c: Level, t: Level, control: Counts, variant: Counts, alpha: number): Compared {
  const critical = normalCritical(alpha);
  const found = fewEvents(control, variant, critical);
  const plain = difference(c, t, alpha);
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
function withoutInterval(estimate: number | null, method: Method, why: Absent, alpha: number): Compared {
  return {
    difference: { estimate, standardError: null, low: null, high: null, z: null, p: null, method },
    relative: why,
    critical: normalCritical(alpha),
    df: null,
    why,
    beside: [],
  };
}

function countsOf(arm: Arm): Counts | null {
  return arm.kind === "proportion" ? counts(arm.sums) : null;
}

function units(arm: Arm): number {
  return arm.kind === "ratio" ? arm.numerator.n : arm.sums.n;
}
