import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { pearson } from "../stats/index.ts";
import { count, list, quoted } from "../words/index.ts";
import { sum } from "./ledger.ts";
import { byP } from "./limits.ts";
import { plannedShares } from "./planned-shares.ts";
import { groups } from "./words.ts";

/** The line of the ledger at which a planned split was lost. */
export interface Step {
  readonly line: string;
  readonly before: ByVariant;
  readonly removed: ByVariant;
}

/**
 * Walks the lines on which enrolled units end, and finds the first after which the split is as bad as it is at the end.
 * Null where the split was that bad at enrolment already: then no line broke it.
 */
export function brokenAt(plan: Plan, reduction: Reduction, atTheEnd: "caution" | "fail"): Step | null {
  let left = reduction.facts.enrolled;
  if (asBad(plan, left, atTheEnd)) return null;
  for (const { id, byVariant } of linesAfterEnrolment(reduction)) {
    const after = left.map((units, i) => units - (byVariant[i] ?? 0));
    if (asBad(plan, after, atTheEnd)) return { line: id, before: left, removed: byVariant };
    left = after;
  }
  return null;
}

function linesAfterEnrolment(reduction: Reduction): { id: string; byVariant: ByVariant }[] {
  const ids = reduction.unitLines.map((line) => line.id);
  return reduction.unitLines
    .slice(ids.indexOf("unknown-variant") + 1, ids.indexOf("analysed"))
    .flatMap(({ id, byVariant }) => (byVariant === null ? [] : [{ id, byVariant }]));
}

function asBad(plan: Plan, counts: ByVariant, outcome: "caution" | "fail"): boolean {
  if (sum(counts) === 0) return false;
  const found = byP(pearson(counts, plannedShares(plan)).p);
  return found === "fail" || found === outcome;
}

export function brokenSentence(plan: Plan, { line, before, removed }: Step): string {
  const where = `Where it broke: before ${lineInWords(plan, line)} the groups were ${groups(plan, before)}`;
  const what = `that removed ${list(removed.map(count))}.`;
  return looksPast(plan, line)
    ? `${where}; ${what} It looks past enrolment, so the variant can change who is removed.`
    : `${where}; ${what}`;
}

export function brokenRemedy(plan: Plan, step: Step | null): string {
  const { many } = plan.unitCalled;
  if (step === null) return "Mend what makes the groups uneven at enrolment, and run the report again.";
  if (looksPast(plan, step.line)) {
    return `Judge ${lineInWords(plan, step.line)} by what was known at enrolment (when: at-enrolment), and run the report again.`;
  }
  if (step.line === "switched") {
    return `Find out how ${many} come to see two variants; count them where they were first enrolled (in-two-variants: first), and run the report again.`;
  }
  return `Find out why ${lineInWords(plan, step.line)} removes more ${many} of one group than of the other; mend it, and run the report again.`;
}

function lineInWords(plan: Plan, line: string): string {
  const { many } = plan.unitCalled;
  if (line.startsWith("filter:")) return `the filter ${quoted(line.slice("filter:".length))}`;
  if (line === "switched") return `the rule that leaves out ${many} seen in two variants`;
  return `the rule that leaves out ${many} not followed to the end`;
}

function looksPast(plan: Plan, line: string): boolean {
  return plan.filters.some(
    (filter) =>
      line === `filter:${filter.name}` && filter.drop === "units" && "when" in filter && filter.when === "ever",
  );
}
