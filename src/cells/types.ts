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
    }
  | {
      readonly kind: "quantile";
      readonly sums: PowerSums;
      /** Which, a plain decimal in (0, 1) as the plan's text has it. */
      readonly q: string;
      /** Values by rank, 1 the smallest, in 10^-9 of the metric's unit: those that the arm's contrasts ask for. */
      readonly ordered: ReadonlyMap<number, bigint>;
    };
