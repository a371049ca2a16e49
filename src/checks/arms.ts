import type { ByVariant } from "../engine/types.ts";
import { fisher, independence } from "../stats/index.ts";
import { sum } from "./ledger.ts";

const EXPECTED_AT_LEAST = 5; // METHODS 7: Fisher's exact test under that

/**
 * Is the share of units with some property the same in every arm? Pearson's chi-square of the 2 x arms table; with an
 * expected count under 5 Fisher's exact test, of more than two arms each against all others, times their number.
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
  if ((rarer * smallestArm) / all < EXPECTED_AT_LEAST) return exactly(arms);
  return independence([arms.map((arm) => arm.having), arms.map((arm) => arm.lacking)]).p;
}

interface ArmCounts {
  readonly having: number;
  readonly lacking: number;
}

/** Of two arms one test is all; of several the smallest p, Bonferroni's. */
function exactly(arms: readonly ArmCounts[]): number {
  const [having, lacking] = [sum(arms.map((arm) => arm.having)), sum(arms.map((arm) => arm.lacking))];
  const compared = arms.length === 2 ? arms.slice(0, 1) : arms;
  const ps = compared.map((arm) => fisher(arm.having, having - arm.having, arm.lacking, lacking - arm.lacking));
  return Math.min(1, compared.length * Math.min(...ps));
}
