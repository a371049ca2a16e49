import type { Fraction } from "../cells/index.ts";

/** Why a figure does not exist. The page says it in words; report.json writes null. */
export interface Absent {
  readonly absent:
    | "no-units"
    | "few-units"
    | "zero-variance"
    | "control-near-zero"
    | "zero-denominator"
    | "lost-digits"
    /** An end of a quantile's interval lies at a rank that the arm does not have. */
    | "few-for-rank"
    /** A quantile whose interval has no width in either arm: most units have the very same value. */
    | "no-width"
    /** What is adjusted for does not vary within the arms. */
    | "same-covariate"
    /** No unit has a value of what is adjusted for. */
    | "no-covariate"
    /** A worthwhile effect is to be shown, and the plan expects none above it. */
    | "no-expected-effect"
    /** What rests on a variance, asked of a quantile. */
    | "not-for-quantiles"
    | "not-built";
}

/** What a contrast compares of an arm: its mean, share or ratio, and how sure that is. */
export interface Level {
  /** Units with a value. */
  readonly n: number;
  /** Exact; `value` is the double nearest to it. */
  readonly exact: Fraction;
  readonly value: number;
  /** v, the variance of the level, not of the units; 0 only where all units have one value. */
  readonly variance: number | Absent;
}

/** An arm as report.json shows it, in the metric's unit; what does not exist is null. */
export interface ArmFigures {
  readonly units: number;
  readonly mean: number | null;
  readonly sd: number | null;
  readonly skewness: number | null;
  readonly kurtosis: number | null;
  readonly total: number | null;
  readonly smallest: number | null;
  readonly largest: number | null;
}

export type Method = "normal" | "welch" | "score" | "skew-corrected" | "quantile";

/** Variant minus control, in the metric's unit. z, p pointwise; low, high the ones that decide (METHODS 2). */
export interface Difference {
  readonly estimate: number | null;
  readonly standardError: number | null;
  readonly low: number | null;
  readonly high: number | null;
  readonly z: number | null;
  readonly p: number | null;
  readonly method: Method;
}

/** mean_t / mean_c - 1 with its interval; an unbounded end is null. */
export interface Relative {
  readonly estimate: number;
  readonly low: number | null;
  readonly high: number | null;
}

/** One metric, one variant against the control. */
export interface Contrast {
  readonly control: ArmFigures;
  readonly variant: ArmFigures;
  readonly difference: Difference;
  readonly relative: Relative | Absent;
  /** The critical value of the interval that decides: z, or t at df. */
  readonly critical: number;
  /** Degrees of freedom where the method is Welch's. */
  readonly df: number | null;
  /** Why the difference has no interval, where it has none. */
  readonly why: Absent | null;
  /** Intervals shown beside the one that counts: the z interval beside Welch's, the score interval beside a proportion's. */
  readonly beside: readonly { readonly method: Method; readonly low: number; readonly high: number }[];
}
