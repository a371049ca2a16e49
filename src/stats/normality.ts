import type { Arm } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { armFigures } from "./arm-figures.ts";
import { estimateOf } from "./difference.ts";
import type { ShapedArm } from "./expansion.ts";
import { type LargestShare, largestShare } from "./largest-share.ts";
import { level } from "./level.ts";
import { shapedArm } from "./shaped-arm.ts";
import { type SkewCorrected, skewCorrected, skewCorrectedRelative } from "./skew-corrected.ts";
import { type Tails, tails } from "./tails.ts";
import type { Absent, ArmFigures, Relative } from "./types.ts";
import { unitsByRule, unitsForTails } from "./units-for-tails.ts";

/** Whether the normal approximation is good enough for one contrast, and what to read where it is not. */
export interface Normality {
  readonly tails: Tails;
  readonly skewCorrected: SkewCorrected & { readonly relative: Relative | Absent };
  /** Null: it cannot be told from these data. */
  readonly unitsForTails: number | null;
  readonly unitsByRule: { readonly kohavi: number; readonly cochran: number };
  /** Null for a proportion, which always has a variance, and for an arm without spread. */
  readonly largestShare: { readonly control: LargestShare | null; readonly variant: LargestShare | null };
}

/** One side of a contrast as the question needs it: of an adjusted one, all are those of y - theta (x - X). */
export interface NormalityArm {
  /** The level as a double. */
  readonly level: number;
  readonly shape: ShapedArm;
  readonly figures: ArmFigures;
}

/**
 * All of METHODS 3 that power sums tell.
 * @param difference variant's level minus control's, exact and rounded once
 * @param z the normal critical value of the interval that decides, also where that is Welch's
 * @param units all analysed units of all arms
 * @param alike `armsAlike` of the contrast's buckets; 0 where there are none
 * @param isShare of a proportion
 */
export function normality(
  control: NormalityArm,
  variant: NormalityArm,
  difference: number,
  z: number,
  units: number,
  alike: number,
  isShare: boolean,
): Normality | Absent {
  const [c, t] = [control.shape, variant.shape];
  const found = tails(c, t, z);
  const corrected = skewCorrected(c, t, difference, z, alike);
  if (isAbsent(found)) return found;
  if (isAbsent(corrected)) return corrected;
  const shares = { control: largestShare(control.figures), variant: largestShare(variant.figures) };
  const firm = ({ n, skewness }: ShapedArm, share: LargestShare | null) => ({
    n,
    skewness,
    ofCubes: share?.ofCubes ?? 0,
  });
  return {
    tails: found,
    skewCorrected: {
      ...corrected,
      relative: skewCorrectedRelative(c, t, { control: control.level, difference }, z, alike),
    },
    unitsForTails: unitsForTails(found, units, firm(c, shares.control), firm(t, shares.variant)),
    unitsByRule: unitsByRule(c.skewness, t.skewness),
    largestShare: isShare ? { control: null, variant: null } : shares,
  };
}

/** The same of two arms of an unadjusted mean, proportion or ratio of totals. */
export function normalityOfArms(
  control: Arm,
  variant: Arm,
  z: number,
  units: number,
  alike: number,
): Normality | Absent {
  const [c, t] = [level(control), level(variant)];
  if (isAbsent(c)) return c;
  if (isAbsent(t)) return t;
  const [ofControl, ofVariant] = [shapedArm(control), shapedArm(variant)];
  if (isAbsent(ofControl)) return ofControl;
  if (isAbsent(ofVariant)) return ofVariant;
  return normality(
    { level: c.value, shape: ofControl, figures: armFigures(control) },
    { level: t.value, shape: ofVariant, figures: armFigures(variant) },
    estimateOf(c, t),
    z,
    units,
    alike,
    control.kind === "proportion",
  );
}
