import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, percent } from "../words/index.ts";
import { armsAlike } from "./arms.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { sum } from "./ledger.ts";
import { byPAtMostCaution, byShare } from "./limits.ts";
import type { Check } from "./types.ts";
import { groupShares, ofDifference, perVariant, units } from "./words.ts";

/** Units whose rows name two variants of the plan: how many, and whether more of them began in one arm. */
export function switched(plan: Plan, reduction: Reduction): Check | null {
  const enrolled = sum(reduction.facts.enrolled);
  if (enrolled === 0) return null;
  const whole = ofUnits(plan, sum(reduction.facts.switched), enrolled);
  const arms = byArm(plan, reduction);
  return asCheck("switched", [whole, ...(arms === null ? [] : [arms])], whole.figures);
}

/** The same for all variants together, before the end: who does more has more chances to be seen in two. */
export function switchedTogether(plan: Plan, reduction: Reduction): Check | null {
  const enrolled = sum(reduction.facts.enrolled);
  if (enrolled === 0) return null;
  const whole = ofUnits(plan, sum(reduction.facts.switched), enrolled);
  return asCheck("switched", [whole], whole.figures);
}

function ofUnits(plan: Plan, n: number, enrolled: number): Finding {
  const share = n / enrolled;
  const figures = { units: n, share };
  if (n === 0) return passed("units", `No ${plan.unitCalled.one} was seen in two variants.`, figures);
  const were = n === 1 ? "was" : "were";
  const then =
    plan.enrolment.inTwoVariants === "exclude"
      ? `${n === 1 ? "It is" : "They are"} left out.`
      : `${n === 1 ? "It counts" : "They count"} where first enrolled.`;
  const sentence = `${units(plan, n)} of ${count(enrolled)} (${percent(share)}) ${were} seen in two variants. ${then}`;
  const amount = byShare(share);
  if (amount === "little") return passed("units", sentence, figures);
  const remedy = `Find out how a ${plan.unitCalled.one} comes to see two variants; where many do, the difference found is smaller than the true one.`;
  return { about: "units", result: "caution", strong: amount === "very-much", sentence, remedy, figures };
}

function byArm(plan: Plan, reduction: Reduction): Finding | null {
  const { switched: having, enrolled } = reduction.facts;
  const p = armsAlike(having, enrolled);
  if (p === null) return null;
  const figures = { units: perVariant(plan, having), p };
  const sentence = `By first variant, ${plan.unitCalled.many} seen in two: ${groupShares(plan, having, enrolled)}. ${ofDifference(p)}`;
  if (byPAtMostCaution(p) === "pass") return passed("by variant", sentence, figures);
  const remedy = `Find out why ${plan.unitCalled.many} leave one variant for another more often than the reverse; leaving them out would then make the groups unlike.`;
  return { about: "by variant", result: "caution", strong: false, sentence, remedy, figures };
}
