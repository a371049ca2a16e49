import type { ByVariant } from "../engine/types.ts";
import { fisher, independence } from "../stats/index.ts";
import { sum } from "./ledger.ts";

const EXPECTED_AT_LEAST = 5; // METHODS 7: Fisher's exact test under that

/**
 * Is the share of units with some property the same in every arm? Pearson's chi-square of the 2 x arms table; for two
 * arms with an expected count under 5, Fisher's exact test.
 * @returns p, or null where nothing can be compared: under two arms with units, or all units alike
 */
export function armsAlike(having: ByVariant, outOf: ByVariant): number | null {
  const arms = outOf
    .map((units, i) => ({ having: having[i] ?? 0, lacking: units - (having[i] ?? 0) }))
    .filter((arm) => arm.having + arm.lacking > 0);
  const all = sum(outOf);
  const rarer = Math.min(sum(arms.map((arm) => arm.having)), sum(arms.map((arm) => arm.lacking)));
  if (arms.length < 2 || rarer === 0) return null;

  const smallestArm = Math.min(...arms.map((arm) => arm.having + arm.lacking));
  const [first, second] = arms;
  if (
    arms.length === 2 &&
    first !== undefined &&
    second !== undefined &&
    (rarer * smallestArm) / all < EXPECTED_AT_LEAST
  ) {
    return fisher(first.having, second.having, first.lacking, second.lacking);
  }
  return independence([arms.map((arm) => arm.having), arms.map((arm) => arm.lacking)]).p;
}
