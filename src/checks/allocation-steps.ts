import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { pearson } from "../stats/index.ts";
import { count, list } from "../words/index.ts";
import { lineInWords, looksPast, removedBy, rowSteps, type Step, stepRemedy, unitSteps } from "./flow.ts";
import { sum } from "./ledger.ts";
import { byP } from "./limits.ts";
import { plannedShares } from "./planned-shares.ts";
import { groups, perVariant } from "./words.ts";

/**
 * The step at which a planned split was lost. The first after which the split is as bad as it is at the end ends the
 * search; of the steps up to it, the one that moved the split most is named. Null where it was that bad from the start.
 */
export function brokenAt(plan: Plan, steps: readonly Step[], atTheEnd: "caution" | "fail"): Step | null {
  const [first] = steps;
  if (first === undefined || asBad(plan, first.before, atTheEnd)) return null;
  const end = steps.findIndex(({ after }) => asBad(plan, after, atTheEnd));
  const moved = (step: Step) => distance(plan, step.after) - distance(plan, step.before);
  const [worst = null] = steps.slice(0, end + 1).toSorted((a, b) => moved(b) - moved(a));
  return worst;
}

/** From the rows as read to those enrolled, and on to those analysed. */
export const stepsToEnrolled = (reduction: Reduction): Step[] => rowSteps(reduction);
export const stepsToAnalysed = (reduction: Reduction): Step[] => [...rowSteps(reduction), ...unitSteps(reduction)];

/** The groups after each step, for the reader who looks for the fault. */
export function stepFigures(plan: Plan, steps: readonly Step[]) {
  return steps.map(({ line, after }) => ({
    after: line,
    counts: perVariant(plan, after),
    ...(sum(after) === 0 ? {} : { p: pearson(after, plannedShares(plan)).p }),
  }));
}

const distance = (plan: Plan, counts: ByVariant) => pearson(counts, plannedShares(plan)).chiSquare;

function asBad(plan: Plan, counts: ByVariant, outcome: "caution" | "fail"): boolean {
  if (sum(counts) === 0) return false;
  const found = byP(pearson(counts, plannedShares(plan)).p);
  return found === "fail" || found === outcome;
}

export function brokenSentence(plan: Plan, step: Step): string {
  const { line, takes, before, after } = step;
  const where = `Where it broke: before ${lineInWords(plan, line)} the groups were ${groups(plan, before)}`;
  if (takes === "rows") return `${where}, after it ${list(after.map(count))}.`;
  const what = `that removed ${list(removedBy(step).map(count))}.`;
  return looksPast(plan, line)
    ? `${where}; ${what} It looks past enrolment, so the variant can change who is removed.`
    : `${where}; ${what}`;
}

export function brokenRemedy(plan: Plan, step: Step | null): string {
  return step === null
    ? "Mend what makes the groups uneven at enrolment, and run the report again."
    : stepRemedy(plan, step);
}
