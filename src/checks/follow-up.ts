import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, percent, plural } from "../words/index.ts";
import { armsAlike } from "./arms.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { analysedUnits, sum, unitsOn } from "./ledger.ts";
import { byPAtMostCaution, FOLLOW_UP_CAUTION_OVER } from "./limits.ts";
import type { Check } from "./types.ts";
import { groupShares, ofDifference, perVariant, units } from "./words.ts";

/**
 * Units that the log ends too early for, as a share of those that reached this line of the ledger. Whether as many of each
 * arm are left out says `exits`; under `incomplete: keep`, where they are analysed, a part of this check.
 */
export function followUp(plan: Plan, reduction: Reduction): Check | null {
  if (plan.followUp === null) return null;
  const { days, incomplete } = plan.followUp;
  const analysed = analysedUnits(reduction);
  const kept = incomplete === "keep" ? reduction.facts.soundness.keptUnfollowed : null;
  if (incomplete === "keep" && kept === null) return null;
  const unfinished = kept === null ? unitsOn(reduction, "follow-up").units : sum(kept);
  const reached = sum(analysed) + (kept === null ? unfinished : 0);
  if (reached === 0) return null;
  const whole = judge(plan, days, unfinished, reached, incomplete);
  const arms = kept === null ? null : byArm(plan, kept, analysed);
  return asCheck("follow-up", [whole, ...(arms === null ? [] : [arms])], whole.figures);
}

function judge(plan: Plan, days: number, unfinished: number, reached: number, incomplete: "exclude" | "keep"): Finding {
  const share = unfinished / reached;
  const figures = { units: unfinished, share };
  const span = plural(days, "day", "days");
  if (unfinished === 0) {
    return passed("units", `Each ${plan.unitCalled.one} counted was followed for all of ${span}.`, figures);
  }
  const were = unfinished === 1 ? "was" : "were";
  const then =
    incomplete === "keep" ? `${unfinished === 1 ? "counts" : "count"} for a shorter time` : `${were} left out`;
  const sentence = `${units(plan, unfinished)} of ${count(reached)} (${percent(share)}) ${were} enrolled less than ${span} before the log ends, and ${then}.`;
  if (share <= FOLLOW_UP_CAUTION_OVER) return passed("units", sentence, figures);
  const remedy = `Wait until the log holds the whole follow-up of the last ${plan.unitCalled.many}, and run the report again; or end enrolment earlier in the plan (before).`;
  return { about: "units", result: "caution", strong: false, sentence, remedy, figures };
}

function byArm(plan: Plan, having: ByVariant, outOf: ByVariant): Finding | null {
  const p = armsAlike(having, outOf);
  if (p === null) return null;
  const { many } = plan.unitCalled;
  const figures = { units: perVariant(plan, having), p };
  const sentence = `Not followed to the end: ${groupShares(plan, having, outOf)}. ${ofDifference(p)}`;
  if (byPAtMostCaution(p) === "pass") return passed("by variant", sentence, figures);
  const remedy = `Leave out ${many} not followed to the end (follow-up: {incomplete: exclude}): one group has more of them, and so less time to act.`;
  return { about: "by variant", result: "caution", strong: false, sentence, remedy, figures };
}
