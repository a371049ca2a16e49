import type { EndedUnits } from "../engine/soundnessTypes.ts";
import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { quoted } from "../words/index.ts";
import { sum } from "./ledger.ts";

/** One step of the flow from the rows as read to the units analysed: the groups before it and after it. */
export interface Step {
  /** The line of the ledger that this step is. */
  readonly line: string;
  /** Whether it takes rows, and so decides by which row a unit is enrolled, or units. */
  readonly takes: "rows" | "units";
  readonly before: ByVariant;
  readonly after: ByVariant;
}

/** Rejected rows, repeated rows and each row filter: what would be enrolled without it, and with it. */
export function rowSteps({ facts }: Reduction): Step[] {
  const { beforeLines } = facts.soundness;
  return beforeLines.map(({ line, byVariant }, i) => ({
    line,
    takes: "rows",
    before: byVariant,
    after: beforeLines[i + 1]?.byVariant ?? facts.enrolled,
  }));
}

/** Each line of the unit ledger after enrolment, but for `analysed`. */
export function unitSteps(reduction: Reduction): Step[] {
  const lines = linesAfterEnrolment(reduction);
  return stepsOf(
    lines.map(({ id }) => id),
    lines.map(({ byVariant }) => byVariant),
  );
}

/** The same steps of one group of units: those of a day, or of a level. */
export function groupSteps(reduction: Reduction, { ended }: EndedUnits): Step[] {
  return stepsOf(
    linesAfterEnrolment(reduction).map(({ id }) => id),
    ended,
  );
}

function stepsOf(ids: readonly string[], ended: readonly ByVariant[]): Step[] {
  return ids
    .slice(0, -1)
    .map((line, i) => ({ line, takes: "units", before: added(ended.slice(i)), after: added(ended.slice(i + 1)) }));
}

function linesAfterEnrolment({ unitLines }: Reduction): { id: string; byVariant: ByVariant }[] {
  const ids = unitLines.map((line) => line.id);
  return unitLines
    .slice(ids.indexOf("unknown-variant") + 1)
    .flatMap(({ id, byVariant }) => (byVariant === null ? [] : [{ id, byVariant }]));
}

/** Counts by variant, added up; none are none. */
export function added(counts: readonly ByVariant[]): number[] {
  const [first = []] = counts;
  return first.map((_, v) => sum(counts.map((own) => own[v] ?? 0)));
}

export function removedBy({ before, after }: Step): number[] {
  return before.map((units, v) => units - (after[v] ?? 0));
}

/** "the filter "robots"", to stand after "before", "at" or "by". */
export function lineInWords(plan: Plan, line: string): string {
  const { many } = plan.unitCalled;
  if (line.startsWith("filter:")) return `the filter ${quoted(line.slice("filter:".length))}`;
  if (line === "rejected") return "the rejection of rows that cannot be used";
  if (line === "duplicate") return "the rule that counts repeated rows once";
  if (line === "switched") return `the rule that leaves out ${many} seen in two variants`;
  return `the rule that leaves out ${many} not followed to the end`;
}

/** Whether a line is a filter that judges units by what they did after enrolment. */
export function looksPast(plan: Plan, line: string): boolean {
  return plan.filters.some(
    (filter) =>
      line === `filter:${filter.name}` && filter.drop === "units" && "when" in filter && filter.when === "ever",
  );
}

/** What to do about a step that takes more of one group than of the other. */
export function stepRemedy(plan: Plan, { line, takes }: Pick<Step, "line" | "takes">): string {
  const { many } = plan.unitCalled;
  const named = lineInWords(plan, line);
  if (looksPast(plan, line)) {
    return `Judge ${named} by what was known at enrolment (when: at-enrolment), and run the report again.`;
  }
  if (line === "switched") {
    return `Find out how ${many} come to see two variants; count them where they were first enrolled (in-two-variants: first), and run the report again.`;
  }
  if (takes === "rows" && line.startsWith("filter:")) {
    return `Let ${named} spare the rows that enrol ${many}, or find out why it takes more of them from one group; then run the report again.`;
  }
  if (takes === "rows") {
    return `Find out why ${line === "rejected" ? "rows of one group are damaged" : "rows of one group come twice"} more often (rejects.csv); mend the log, and run the report again.`;
  }
  return `Find out why ${named} removes more ${many} of one group than of the other; mend it, and run the report again.`;
}
