import { bonferroniCritical, bonferroniP } from "./bonferroni.ts";
import { dunnettCritical, dunnettP } from "./dunnett.ts";
import { normalCritical } from "./normal.ts";

/**
 * The critical value that makes the intervals of several variants against one control hold at once: Dunnett's, or
 * Bonferroni's where the variance of a level is 0. One variant: the normal's.
 * @param varianceControl v of the control's level, one of all the contrasts
 * @param variances v of each variant's level, at least one
 * @param alpha in (0, 1), for all intervals together; a t interval takes the tail `2 normalUpperTail(critical)`
 *
 * Source: Dunnett 1955, JASA 50, 1096-1121; Dunn 1961, JASA 56, 52-64.
 */
export function criticalOfSimultaneous(varianceControl: number, variances: readonly number[], alpha: number): number {
  const lambdas = lambdasOf(varianceControl, variances);
  return lambdas === null ? bonferroniCritical(alpha, variances.length) : dunnettCritical(lambdas, alpha);
}

/**
 * p of one contrast adjusted for all variants in a single step: P(max |Z| >= |z|) with |z| at the contrast's own p, by
 * whichever method that was found. Under alpha exactly when the interval at `criticalOfSimultaneous` excludes 0.
 * @param p two-sided, pointwise; with one variant it is returned as it is
 */
export function pOfSimultaneous(p: number, varianceControl: number, variances: readonly number[]): number {
  if (variances.length === 1) return p;
  const lambdas = lambdasOf(varianceControl, variances);
  if (lambdas === null) return bonferroniP(p, variances.length);
  // The ends have no quantile as a double: p 1 is z 0, and p 0 is a z whose tail no double holds.
  return p >= 1 ? 1 : p <= 0 ? 0 : dunnettP(normalCritical(p), lambdas);
}

/** lambda_i = sqrt(v_c / (v_i + v_c)); null where a variance is 0, so that the contrasts have no common part to lean on. */
function lambdasOf(varianceControl: number, variances: readonly number[]): number[] | null {
  if (varianceControl === 0 || variances.includes(0)) return null;
  return variances.map((variance) => Math.sqrt(varianceControl / (variance + varianceControl)));
}
