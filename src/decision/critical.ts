import type { Arm } from "../cells/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import {
  bonferroniCritical,
  bonferroniP,
  criticalOfSimultaneous,
  isAbsent,
  level,
  lookCritical,
  normalCritical,
  pOfSimultaneous,
} from "../stats/index.ts";
import { alphaOf } from "./alpha.ts";
import { alphaAtLooks, looksAsPlanned, looksSoFar, pAtLook } from "./looks.ts";

/** The variances of the levels that the contrasts of one metric compare; the variants in plan order. */
export interface Variances {
  readonly control: number;
  readonly variants: readonly number[];
}

/**
 * The critical value, on the normal's scale, that the intervals of a metric's contrasts take (METHODS 2): pointwise for a
 * secondary metric; for what decides the one that makes the intervals of all variants hold at once, Dunnett's, of a
 * quantile Bonferroni's; with planned looks the boundary of this look, the error shared out evenly over the variants.
 */
export function criticalOf(plan: Plan, metric: Metric, { control, variants }: Variances): number {
  const alpha = alphaOf(plan, metric);
  if (metric.role === "secondary") return normalCritical(alpha);
  const looks = looksSoFar(plan);
  if (looks !== null) return lookCritical(looks, alphaAtLooks(plan, metric));
  if (metric.summary === "quantile") return bonferroniCritical(alpha, variants.length);
  return criticalOfSimultaneous(control, variants, alpha);
}

/** p of one contrast, adjusted for the variants and the looks: under `alphaOf` exactly when the interval at `criticalOf` excludes 0. */
export function pOfVariants(plan: Plan, metric: Metric, p: number, { control, variants }: Variances): number {
  if (plan.looks !== null) return bonferroniP(pAtLook(plan, p), variants.length);
  if (metric.summary === "quantile") return bonferroniP(p, variants.length);
  return pOfSimultaneous(p, control, variants);
}

/**
 * The critical value that a test like this one is judged by at its end, for sizes: with planned looks their last boundary,
 * else the one that counts here.
 */
export function criticalAtEnd(plan: Plan, metric: Metric, critical: number): number {
  const looks = looksAsPlanned(plan);
  if (looks === null || metric.role === "secondary") return critical;
  return lookCritical(looks, alphaAtLooks(plan, metric));
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
