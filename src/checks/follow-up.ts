import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, percent, plural } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { unitsOn } from "./ledger.ts";
import { FOLLOW_UP_CAUTION_OVER } from "./limits.ts";
import type { Check } from "./types.ts";
import { units } from "./words.ts";

/**
 * Units that the log ends too early for, as a share of those that reached this line of the ledger. Under
 * `incomplete: keep` they are analysed and the reduction does not tell them apart, so there is no check.
 */
export function followUp(plan: Plan, reduction: Reduction): Check | null {
  if (plan.followUp === null || plan.followUp.incomplete === "keep") return null;
  const unfinished = unitsOn(reduction, "follow-up").units;
  const reached = unfinished + unitsOn(reduction, "analysed").units;
  if (reached === 0) return null;
  const finding = judge(plan, plan.followUp.days, unfinished, reached);
  return asCheck("follow-up", [finding], finding.figures);
}

function judge(plan: Plan, days: number, unfinished: number, reached: number): Finding {
  const share = unfinished / reached;
  const figures = { units: unfinished, share };
  const span = plural(days, "day", "days");
  if (unfinished === 0) {
    return passed("units", `Each ${plan.unitCalled.one} counted was followed for all of ${span}.`, figures);
  }
  const were = unfinished === 1 ? "was" : "were";
  const sentence = `${units(plan, unfinished)} of ${count(reached)} (${percent(share)}) ${were} enrolled less than ${span} before the log ends, and ${were} left out.`;
  if (share <= FOLLOW_UP_CAUTION_OVER) return passed("units", sentence, figures);
  const remedy = `Wait until the log holds the whole follow-up of the last ${plan.unitCalled.many}, and run the report again; or end enrolment earlier in the plan (before).`;
  return { about: "units", result: "caution", strong: false, sentence, remedy, figures };
}
