import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { capital } from "../words/index.ts";
import { armsAlike } from "./arms.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { lineInWords, looksPast, removedBy, type Step, stepRemedy, unitSteps } from "./flow.ts";
import { byP } from "./limits.ts";
import type { Check } from "./types.ts";
import { groupShares, ofDifference, perVariant } from "./words.ts";

/**
 * Does each line of the ledger after enrolment take the same share of every group? One part a line: left at it against
 * passed it, by arm. It finds what the sizes of the groups hide: 300 of 25,000 gone from one only.
 */
export function exits(plan: Plan, reduction: Reduction): Check | null {
  return asCheck(
    "exits",
    unitSteps(reduction).flatMap((step) => judge(plan, step)),
    {},
  );
}

function judge(plan: Plan, step: Step): Finding[] {
  const removed = removedBy(step);
  const p = armsAlike(removed, step.before);
  if (p === null) return [];
  const { many } = plan.unitCalled;
  const result = byP(p);
  const figures = { p, left: perVariant(plan, removed), of: perVariant(plan, step.before) };
  const name = lineInWords(plan, step.line);
  const sentence = `${capital(many)} who left at ${name}: ${groupShares(plan, removed, step.before)}. ${ofDifference(p)}`;
  if (result === "pass") return [passed(step.line, sentence, figures)];
  const past = looksPast(plan, step.line)
    ? " It looks past enrolment, so the variant can change who is removed."
    : ` Those left are no longer alike: ${many} of one group are missing more often.`;
  return [
    { about: step.line, result, strong: false, sentence: sentence + past, remedy: stepRemedy(plan, step), figures },
  ];
}
