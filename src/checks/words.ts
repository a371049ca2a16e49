import type { ByVariant } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { chanceText, count, list, percent, plural, pText, quoted } from "../words/index.ts";
import { byP } from "./limits.ts";

/** "1,204 visitors", in the plan's own words. */
export function units(plan: Plan, n: number): string {
  return plural(n, plan.unitCalled.one, plan.unitCalled.many);
}

/** '50,087 visitors with "list" and 47,902 with "calendar"'. */
export function groups(plan: Plan, counts: ByVariant): string {
  return list(
    plan.variants.map((variant, i) => {
      const n = counts[i] ?? 0;
      return `${i === 0 ? units(plan, n) : count(n)} with ${quoted(variant.name)}`;
    }),
  );
}

/** '61 with "list" (0.12%) and 212 with "calendar" (0.42%)'; an arm without units has no share. */
export function groupShares(plan: Plan, having: ByVariant, outOf: ByVariant): string {
  return list(
    plan.variants.map((variant, i) => {
      const [n, all] = [having[i] ?? 0, outOf[i] ?? 0];
      return `${count(n)} with ${quoted(variant.name)}${all === 0 ? "" : ` (${percent(n / all)})`}`;
    }),
  );
}

/** "Chance alone gives so large a difference in about one test in 1,300 (p = 0.00077)." */
export function byChance(what: string, p: number): string {
  return `Chance alone gives ${what} ${chanceText(p)} (${pText(p)}).`;
}

/** What chance has to say of a difference between groups, whether it is one or not. */
export function ofDifference(p: number): string {
  return byP(p) === "pass" ? `Chance can explain the difference (${pText(p)}).` : byChance("so large a difference", p);
}

/** Counts under the variants' names, as figures. */
export function perVariant(plan: Plan, counts: ByVariant): Record<string, number> {
  return Object.fromEntries(plan.variants.map((variant, i) => [variant.name, counts[i] ?? 0]));
}

/** An entry of the log, where a plan has several; not by its files, for the same rows in other files are told alike. */
export function entryName(source: number): string {
  return `entry ${source + 1} of the log`;
}
