import type { Arm } from "../cells/types.ts";
import type { Plan } from "../plan/types.ts";
import { contrast, isAbsent } from "../stats/index.ts";
import type { Absent, Contrast } from "../stats/types.ts";
import type { Buckets, BucketsOf } from "./buckets.ts";
import type { Pair, PairArms } from "./covariates.ts";

/** Two arms that are compared, and what their cells by bucket say of them; null for quantiles. */
export interface Compared {
  readonly control: Arm;
  readonly variant: Arm;
  readonly buckets: Buckets | null;
}

/** Two adjusted arms. */
export type ComparedPair = Compared & { readonly pair: PairArms };

/** The contrast by the method that counts: the plan may ask for the skew-corrected interval. */
export function comparedContrast({ decision }: Plan, compared: Compared, critical: number): Contrast {
  return contrastWith(decision.interval, compared, critical);
}

export function contrastWith(
  interval: Plan["decision"]["interval"],
  { control, variant, buckets }: Compared,
  critical: number,
): Contrast {
  const corrected = interval === "skew-corrected" && buckets !== null ? { alike: buckets.alike } : null;
  return contrast(control, variant, critical, corrected);
}

/** Adjusted arms, as any other two that are compared. */
export function comparedPair(
  pair: Pair["found"] | null,
  buckets: BucketsOf | null,
  control: number,
  variant: number,
): ComparedPair | Absent | null {
  if (pair === null || isAbsent(pair)) return pair;
  return {
    pair,
    control: pair.control.arm,
    variant: pair.variant.arm,
    buckets: buckets?.(control, variant, true) ?? null,
  };
}
