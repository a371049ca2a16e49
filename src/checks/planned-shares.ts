import type { Plan } from "../plan/types.ts";
import { sum } from "./ledger.ts";

/** The share of all units that the plan gives each variant; they add up to 1. */
export function plannedShares(plan: Plan): number[] {
  const all = sum(plan.variants.map((variant) => variant.allocation));
  return plan.variants.map((variant) => variant.allocation / all);
}
