import type { Role, Summary } from "../plan/types.ts";
import type { Contrast } from "../stats/types.ts";

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
  readonly contrast: Contrast;
  /** min(1, variants p) for primaries and guardrails; null for secondary metrics. */
  readonly pAdjusted: number | null;
  readonly zone: Zone;
  /** Only on a primary: the interval also excludes a worthwhile loss (METHODS 2, no worthwhile difference either way). */
  readonly eitherWay: boolean;
}

export type DecisionWord = "adopt" | "keep-control" | "not-settled" | "undecidable";

export interface Conclusion {
  readonly decision: DecisionWord;
  /** The adopted variant, else null. */
  readonly variant: string | null;
  readonly sentence: string;
  readonly reasons: readonly string[];
}
