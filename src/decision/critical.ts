import type { Arm } from "../cells/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import {
  bonferroniCritical,
  bonferroniP,
  criticalOfSimultaneous,
  isAbsent,
  level,
  normalCritical,
  pOfSimultaneous,
} from "../stats/index.ts";

/** The variances of the levels that the contrasts of one metric compare; the variants in plan order. */
export interface Variances {
  readonly control: number;
  readonly variants: readonly number[];
}

/**
 * The critical value, on the normal's scale, that the intervals of a metric's contrasts take (METHODS 2): pointwise for a
 * secondary metric; for what decides the one that makes the intervals of all variants hold at once, Dunnett's, of a
 * quantile Bonferroni's.
 */
export function criticalOf(plan: Plan, metric: Metric, { control, variants }: Variances): number {
  const alpha = alphaOf(plan, metric);
  if (metric.role === "secondary") return normalCritical(alpha);
  if (metric.summary === "quantile") return bonferroniCritical(alpha, variants.length);
  return criticalOfSimultaneous(control, variants, alpha);
}

/** p of one contrast, adjusted for the variants: under `alphaOf` exactly when the interval at `criticalOf` excludes 0. */
export function pOfVariants(metric: Metric, p: number, { control, variants }: Variances): number {
  if (metric.summary === "quantile") return bonferroniP(p, variants.length);
  return pOfSimultaneous(p, control, variants);
}

/** alpha of all intervals of one metric together; where any one primary is enough, each of them has its part. */
export function alphaOf({ decision, metrics }: Plan, { role }: Metric): number {
  const alpha = 1 - decision.confidence;
  if (role !== "primary" || decision.primaries === "all") return alpha;
  return alpha / metrics.filter((metric) => metric.role === "primary").length;
}

/** A variance that does not exist counts as 0: the critical value is Bonferroni's then, and holds whatever is missing. */
export function variancesOf(control: Arm, variants: readonly Arm[]): Variances {
  return { control: varianceOf(control), variants: variants.map(varianceOf) };
}

/**
 * The same where each contrast has a control of its own, as adjusted ones have by their slopes. Only the ratio of the two
 * variances counts, so each control's is taken as 1. Their slopes apart, the contrasts are as correlated as unadjusted ones.
 */
export function variancesOfPairs(pairs: readonly { readonly control: Arm; readonly variant: Arm }[]): Variances {
  const ratio = (control: number, variant: number) => (control === 0 ? 0 : variant / control);
  return { control: 1, variants: pairs.map((pair) => ratio(varianceOf(pair.control), varianceOf(pair.variant))) };
}

function varianceOf(arm: Arm): number {
  const found = level(arm);
  return isAbsent(found) || isAbsent(found.variance) ? 0 : found.variance;
}
