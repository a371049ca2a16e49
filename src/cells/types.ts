import type { Fraction } from "./fraction.ts";

/**
 * Exact power sums of one group of units: n and S_k, k = 1..4, the sum of u^k with u = (x - pivot) / scale.
 * Groups with the same pivot and scale are merged by adding.
 */
export interface PowerSums {
  readonly n: number;
  /** Exact decimal text, up to 9 places; "0" for a score. */
  readonly pivot: string;
  /** A power of two. */
  readonly scale: number;
  /** S_1..S_4 in units of 2^-120. */
  readonly powers: readonly [bigint, bigint, bigint, bigint];
  /** Exact mean of x where x is a decimal: total in 10^-9 of the metric's unit. Null for a score. */
  readonly total: bigint | null;
  /** Null when n is 0. */
  readonly smallest: number | null;
  readonly largest: number | null;
}

/** One arm of one metric, ready for stats. */
export type Arm =
  | { readonly kind: "mean" | "proportion"; readonly sums: PowerSums }
  | {
      readonly kind: "ratio";
      readonly numerator: PowerSums;
      readonly denominator: PowerSums;
      /** Of d = (a - R b) / mean(b); null when the arm has no unit or its denominators sum to 0. */
      readonly score: PowerSums | null;
      /** Of (numerator, denominator); without it the denominator's part in the standard error comes from the score. */
      readonly joint?: JointSums | null;
    }
  | {
      readonly kind: "quantile";
      readonly sums: PowerSums;
      /** Which, a plain decimal in (0, 1) as the plan's text has it. */
      readonly q: string;
      /** Values by rank, 1 the smallest, in 10^-9 of the metric's unit: those that the arm's contrasts ask for. */
      readonly ordered: ReadonlyMap<number, bigint>;
    }
  | {
      /** Of an adjusted contrast: the units' values are y - theta (x - X) (METHODS 1). */
      readonly kind: "adjusted";
      readonly summary: "mean" | "proportion";
      /** Their mean, exact for that theta. */
      readonly mean: Fraction;
      /** Their sums; no exact total, for they are computed in doubles. */
      readonly sums: PowerSums;
      /** How far a value can be off by that, in the metric's unit. */
      readonly noise: number;
    };

/**
 * Exact joint sums of two values (y, x) over the units of an arm that have both: S_jk is the sum of u^j w^k, u = (y - pivot)
 * / scale with y's pivot and scale, w likewise with x's. Groups with the same pivots and scales are merged by adding.
 */
export interface JointSums {
  readonly n: number;
  readonly pivots: readonly [y: string, x: string];
  readonly scales: readonly [y: number, x: number];
  /** In units of 2^-120. */
  readonly s10: bigint;
  readonly s01: bigint;
  readonly s20: bigint;
  readonly s11: bigint;
  readonly s02: bigint;
  /** Exact sums of y and of x over these units, in 10^-9 of the unit of each. */
  readonly totals: readonly [y: bigint, x: bigint];
}

/** One arm of a mean or proportion that is adjusted for a covariate. */
export interface CovariateArm {
  /** y over all units with a value. */
  readonly value: PowerSums;
  /** x over those of them that have one; its n is how many. Both arms have one pivot and scale. */
  readonly covariate: PowerSums;
  /** y and x together over the same units, by the pivots and scales of the two above. */
  readonly joint: JointSums;
}

/** Sums of one value by bucket: n and the first two power sums about any one pivot, in any one scale. Arrays of one length. */
export interface BucketSums {
  readonly n: Float64Array;
  readonly s1: Float64Array;
  readonly s2: Float64Array;
}

/** Sums of two values (y, x) of the same units by bucket, each about a pivot and in a scale. Arrays of one length. */
export interface PairSums {
  readonly n: Float64Array;
  readonly y: Float64Array;
  readonly x: Float64Array;
  readonly yy: Float64Array;
  readonly yx: Float64Array;
  readonly xx: Float64Array;
}

/** One contrast by bucket, as doubles, for resampling: both arms by the same buckets, with the same pivots and scales. */
export type BucketCells =
  | { readonly kind: "mean"; readonly control: BucketSums; readonly variant: BucketSums }
  | {
      /** y is the numerator and x the denominator, or y the value and x the covariate. */
      readonly kind: "ratio" | "adjusted";
      readonly pivots: readonly [y: number, x: number];
      readonly scales: readonly [y: number, x: number];
      readonly control: PairSums;
      readonly variant: PairSums;
    };
