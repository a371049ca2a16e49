import { normalCritical } from "./normal.ts";

/**
 * The critical value that makes k intervals hold at once: z(1 - alpha / (2 k)).
 * @param k intervals, at least 1
 *
 * Source: Dunn 1961, JASA 56, 52-64.
 */
export function bonferroniCritical(alpha: number, k: number): number {
  return normalCritical(alpha / k);
}

/** p of one of k contrasts, adjusted for their number: min(1, k p). Source: Dunn 1961. */
export function bonferroniP(p: number, k: number): number {
  return Math.min(1, k * p);
}
