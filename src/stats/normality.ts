import type { Arm } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { armFigures } from "./arm-figures.ts";
import { estimateOf } from "./difference.ts";
import { type LargestShare, largestShare } from "./largest-share.ts";
import { level } from "./level.ts";
import { shapedArm } from "./shaped-arm.ts";
import { type SkewCorrected, skewCorrected } from "./skew-corrected.ts";
import { type Tails, tails } from "./tails.ts";
import type { Absent, ArmFigures } from "./types.ts";
import { type ArmFirmness, unitsByRule, unitsForTails } from "./units-for-tails.ts";

/** Whether the normal approximation is good enough for one contrast (METHODS 3). */
export interface Normality {
  readonly tails: Tails;
  /** Units of all arms from which on both tails are near; null: cannot be told from these data. */
  readonly unitsForTails: number | null;
  /** Rules of thumb, units for each arm. */
  readonly unitsByRule: { readonly kohavi: number; readonly cochran: number };
  /** The skew-corrected interval of the difference, whichever counts. */
  readonly corrected: SkewCorrected;
  /** How much of each arm's spread one unit holds. Null for shares, whose variance always exists. */
  readonly largest: { readonly control: LargestShare | null; readonly variant: LargestShare | null } | null;
}

/**
 * What the two arms' own moments say of the normal interval of their contrast.
 * @param z the critical value that counts, on the normal's scale
 * @param alike how far the arms look like one distribution, 1 to 0 (`armsAlike`)
 * @param units all analysed units of all arms, which `unitsForTails` grows in proportion
 * @returns `not-for-quantiles`; else as `shapedArm` and `tails`
 */
export function normality(control: Arm, variant: Arm, z: number, alike: number, units: number): Normality | Absent {
  if (control.kind === "quantile" || variant.kind === "quantile") return { absent: "not-for-quantiles" };
  const [c, t] = [shapedArm(control), shapedArm(variant)];
  if (isAbsent(c)) return c;
  if (isAbsent(t)) return t;
  const found = tails(c, t, z);
  if (isAbsent(found)) return found;
  const [ofControl, ofVariant] = [level(control), level(variant)];
  if (isAbsent(ofControl) || isAbsent(ofVariant)) throw new Error("a shape came of an arm without a level");
  const corrected = skewCorrected(c, t, estimateOf(ofControl, ofVariant), z, alike);
  if (isAbsent(corrected)) return corrected;
  const figures = { control: armFigures(control), variant: armFigures(variant) };
  const largest = { control: largestShare(figures.control), variant: largestShare(figures.variant) };
  return {
    tails: found,
    corrected,
    unitsForTails: unitsForTails(
      found,
      units,
      firmness(figures.control, largest.control),
      firmness(figures.variant, largest.variant),
    ),
    unitsByRule: unitsByRule(c.skewness, t.skewness),
    largest: isShare(control) ? null : largest,
  };
}

/** An arm whose units do not vary has no cubes to be ruled by. */
function firmness({ units, skewness }: ArmFigures, largest: LargestShare | null): ArmFirmness {
  return { n: units, skewness: skewness ?? 0, ofCubes: largest?.ofCubes ?? 0 };
}

function isShare(arm: Arm): boolean {
  return arm.kind === "proportion" || (arm.kind === "adjusted" && arm.summary === "proportion");
}
