import { normalCritical } from "./normal.ts";

/**
 * The normal quantile z(q): P(Z <= z) = q.
 * @param q in (0, 1); power 0.8 gives 0.8416
 */
export function normalQuantile(q: number): number {
  if (q === 0.5) return 0;
  return q < 0.5 ? -normalCritical(2 * q) : normalCritical(2 * (1 - q));
}
