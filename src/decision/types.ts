import type { Role, Summary } from "../plan/types.ts";
import type { Balance, Normality, Resampled, ToDraw } from "../stats/index.ts";
import type { Absent, Contrast } from "../stats/types.ts";

export type Zone =
  | "worthwhile"
  | "worse"
  | "too-small"
  | "better"
  | "no-worthwhile-gain"
  | "not-settled"
  | "within"
  | "beyond";

/** One row of `effects` in report.json, with what the page needs beside it. */
export interface Effect {
  readonly metric: string;
  readonly role: Role;
  readonly summary: Summary;
  readonly variant: string;
  readonly control: string;
  /** Unadjusted. */
  readonly contrast: Contrast;
  /** Adjusted for the plan's covariate: where not null this one decides, and zone, p and power are its. */
  readonly adjusted: AdjustedContrast | null;
  /** Why there is none, where the plan asks for one. */
  readonly notAdjusted: Absent | null;
  /**
   * p adjusted for the family (METHODS 2): of primaries and guardrails for the variants, Dunnett's; where any primary is
   * enough then over the primaries, Holm's; of secondary metrics over all their contrasts, Benjamini and Hochberg's.
   */
  readonly pAdjusted: number | null;
  /** Holm's p over the same family, shown beside; null for secondary metrics and for one variant. */
  readonly pHolm: number | null;
  readonly zone: Zone;
  /** Only on a primary: the interval also excludes a worthwhile loss (METHODS 2, no worthwhile difference either way). */
  readonly eitherWay: boolean;
  readonly power: Power;
  /** Of the contrast that decides; null for a quantile, and where an arm's shape is not known. */
  readonly normality: ContrastNormality | null;
  /** Of the contrast that decides, at which critical value; null for a quantile, and where it has no interval. */
  readonly resampled: (Resampled & { readonly critical?: number }) | null;
  /** What is still to be drawn for `resampled`; null once it is, and where nothing is. */
  readonly toDraw: ToDraw | null;
}

/** Whether the normal approximation is good enough for one contrast (METHODS 3). */
export interface ContrastNormality extends Normality {
  /** The critical value that counts, on the normal's scale. */
  readonly critical: number;
  /**
   * The same contrast by the interval that does not count: the skew-corrected one beside the normal or Welch's, and the
   * other way round. Null beside a score interval.
   */
  readonly other: Contrast | null;
}

/** The contrast of y - theta (x - X), x the plan's covariate (METHODS 1). */
export interface AdjustedContrast {
  readonly contrast: Contrast;
  readonly theta: number;
  /** X, the mean of x over both arms. */
  readonly centre: number;
  /** Share of the variance of the difference that the adjustment takes away. */
  readonly varianceReduction: number;
  /** Units whose x is missing, of those with a value. */
  readonly withoutCovariate: { readonly control: number; readonly variant: number };
  /** How x itself differs between the arms, where only chance should tell them apart; pointwise. */
  readonly balance: Balance;
  /** p of the unadjusted contrast, adjusted for its family as if the plan had no covariate. */
  readonly pAdjustedOfPlain: number | null;
}

/** METHODS 4; null where the data or the plan give nothing to compute it from. */
export interface Power {
  /** The smallest true effect that a test of this size finds with the plan's power, in the metric's unit. */
  readonly detectable: number | null;
  /** Units of all arms that the plan's worthwhile effect, or margin, needs; not rounded. */
  readonly unitsForWorthwhile: number | null;
  /** Of a primary: mean size of the estimates that exclude 0, over the worthwhile effect, were that the true one. */
  readonly exaggeration: number | null;
}

export type DecisionWord = "adopt" | "keep-control" | "not-settled" | "undecidable";

export interface Conclusion {
  readonly decision: DecisionWord;
  /** The adopted variant, else null. */
  readonly variant: string | null;
  readonly sentence: string;
  readonly reasons: readonly string[];
}
