import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { allocation } from "./allocation.ts";
import { allocationByDay } from "./allocation-by-day.ts";
import { allocationByLevel } from "./allocation-by-level.ts";
import { balance } from "./balance.ts";
import { duplicatesTogether } from "./duplicates.ts";
import { exits } from "./exits.ts";
import { filters } from "./filters.ts";
import { gapsTogether } from "./gaps.ts";
import { neverOccurs } from "./never-occurs.ts";
import { rejectedTogether } from "./rejected.ts";
import { span } from "./span.ts";
import { switchedTogether } from "./switched.ts";
import type { Check } from "./types.ts";
import { unknownVariants } from "./unknown-variants.ts";
import { withoutRowsTogether } from "./without-rows.ts";

/**
 * How much of each check a reader may see before the end (METHODS 7). By variant only what the assignment and the flow of
 * units show, and what was known of units before they were enrolled; what units did afterwards for all variants together,
 * since a difference in it is, or gives away, an effect: a variant that makes people do more has more rows to be rejected, to
 * come twice, or to show a second variant.
 * - whole: as in the report
 * - together: without its parts by variant
 * - withheld: not at all
 * - told: its figures belong to how far the test is, where they are no fault
 */
export const BEFORE_THE_END: Readonly<Record<string, "whole" | "together" | "withheld" | "told">> = {
  allocation: "whole",
  "allocation-by-day": "whole",
  "allocation-by-level": "whole",
  exits: "whole",
  rejected: "together",
  duplicates: "together",
  switched: "together",
  "unknown-variants": "whole",
  gaps: "together",
  span: "whole",
  "follow-up": "told",
  balance: "whole",
  filters: "whole",
  "never-occurs": "whole",
  weeks: "told",
  "stopped-early": "told",
  "one-unit": "withheld",
  normality: "withheld",
  "without-rows": "together",
  denominator: "withheld",
  "plan-changed": "whole",
};

const CHECKS: readonly ((plan: Plan, reduction: Reduction) => Check | null)[] = [
  allocation,
  allocationByDay,
  allocationByLevel,
  exits,
  rejectedTogether,
  duplicatesTogether,
  switchedTogether,
  unknownVariants,
  gapsTogether,
  span,
  balanceBeforehand,
  filters,
  neverOccurs,
  withoutRowsTogether,
];

/** The soundness checks as far as they may be seen before the end, in the order of METHODS 7. */
export function blindChecks(plan: Plan, reduction: Reduction): Check[] {
  return CHECKS.map((check) => check(plan, reduction)).filter((check) => check !== null);
}

/** Of a metric that leaves units out, the covariate is over those with a value: who has one is an outcome. */
function balanceBeforehand(plan: Plan, reduction: Reduction): Check | null {
  const counted = plan.metrics.map(({ withoutRows }) => withoutRows === "zero");
  return balance(
    { ...plan, metrics: plan.metrics.filter((_, m) => counted[m]) },
    { ...reduction, metrics: reduction.metrics.filter((_, m) => counted[m]) },
  );
}
