import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { allocation } from "./allocation.ts";
import { allocationByDay } from "./allocation-by-day.ts";
import { allocationByLevel } from "./allocation-by-level.ts";
import { balance } from "./balance.ts";
import { denominator } from "./denominator.ts";
import { duplicates } from "./duplicates.ts";
import { exits } from "./exits.ts";
import { filters } from "./filters.ts";
import { followUp } from "./follow-up.ts";
import { gaps } from "./gaps.ts";
import { neverOccurs } from "./never-occurs.ts";
import { normality } from "./normality.ts";
import { oneUnit } from "./one-unit.ts";
import { rejected } from "./rejected.ts";
import { span } from "./span.ts";
import { stoppedEarly } from "./stopped-early.ts";
import { switched } from "./switched.ts";
import type { Check, ContrastFigures } from "./types.ts";
import { unknownVariants } from "./unknown-variants.ts";
import { weeks } from "./weeks.ts";
import { withoutRows } from "./without-rows.ts";

export { covariates } from "./balance.ts";
export { BEFORE_THE_END, blindChecks } from "./blind.ts";
export { CORRECTED_COUNTS, tailsInWords } from "./normality.ts";
export { planChanged } from "./plan-changed.ts";
export { plannedShares } from "./planned-shares.ts";
export type { Check, CheckOutcome, CheckPart, ContrastFigures, Figure } from "./types.ts";

/** Every soundness check, in the order of METHODS 7. A check that does not apply gives null. */
const CHECKS: readonly ((plan: Plan, reduction: Reduction, contrasts: readonly ContrastFigures[]) => Check | null)[] = [
  allocation,
  allocationByDay,
  allocationByLevel,
  exits,
  rejected,
  duplicates,
  switched,
  unknownVariants,
  gaps,
  span,
  followUp,
  balance,
  filters,
  neverOccurs,
  weeks,
  stoppedEarly,
  oneUnit,
  normality,
  withoutRows,
  denominator,
];

/**
 * Tests of the data, not of the effect. Those that do not apply, or cannot be computed, are not in the list.
 * @param contrasts one a metric and variant; without them nothing is said of the normal approximation
 */
export function checks(plan: Plan, reduction: Reduction, contrasts: readonly ContrastFigures[] = []): Check[] {
  return CHECKS.map((check) => check(plan, reduction, contrasts)).filter((check) => check !== null);
}
