import type { Check, CheckPart } from "../checks/types.ts";
import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { list, quoted } from "../words/index.ts";

/** The checks that stop a decision when they fail (METHODS 7). */
const STOPS: readonly string[] = [
  "allocation",
  "allocation-by-day",
  "allocation-by-level",
  "exits",
  "rejected",
  "gaps",
  "balance",
];

/** Why no decision can be taken from these data, each with what to do; empty when one can. No estimate stands in it. */
export function obstacles(plan: Plan, checks: readonly Check[], reduction: Reduction): string[] {
  const failed = failures(plan, checks);
  const all = failed.flatMap(({ check, parts }) => parts.map((part) => ({ id: check.id, part })));
  const told = failed.flatMap(({ check, parts }) =>
    tellFault(
      check,
      parts.filter((part) => !isToldBefore(check.id, part, all)),
      parts.length === 0,
    ),
  );
  // One fault shows in several checks, and the remedy is one.
  return [...new Set(told), ...emptyArms(plan, reduction)];
}

interface FailedPart {
  readonly id: string;
  readonly part: CheckPart;
}

/**
 * Whether a failure follows from one that is told above it: units that leave at the line which broke the split, the same
 * days or levels once more at a later stage, or those counted where those enrolled were uneven already.
 */
function isToldBefore(id: string, part: CheckPart, all: readonly FailedPart[]): boolean {
  const before = all.slice(
    0,
    all.findIndex((one) => one.part === part),
  );
  const isNamed = (line: unknown) => line !== undefined && before.some((one) => one.part.figures.brokenAt === line);
  const others = before.filter((one) => one.id === id);
  switch (id) {
    case "exits":
      return isNamed(part.about);
    case "allocation":
      return part.figures.brokenAt === undefined ? others.length > 0 : isNamed(part.figures.brokenAt);
    case "allocation-by-day":
    case "allocation-by-level":
      return part.figures.brokenAt === undefined ? part.figures.stage === "analysed" : isNamed(part.figures.brokenAt);
    default:
      return false;
  }
}

interface Failure {
  readonly check: Check;
  readonly parts: readonly CheckPart[];
}

function failures(plan: Plan, checks: readonly Check[]): Failure[] {
  return checks
    .map((check) => ({
      check,
      parts: check.parts.filter((part) => part.result === "fail" && stops(plan, check, part)),
    }))
    .filter(({ check, parts }) => parts.length > 0 || (check.parts.length === 0 && failsWhole(check)));
}

function failsWhole(check: Check): boolean {
  return check.result === "fail" && STOPS.includes(check.id);
}

/** A metric that leaves units out stops the decision only where the metric takes part in it. */
function stops(plan: Plan, check: Check, part: CheckPart): boolean {
  if (STOPS.includes(check.id)) return true;
  const metric = plan.metrics.find(({ name }) => name === part.about);
  return check.id === "without-rows" && metric !== undefined && metric.role !== "secondary";
}

function tellFault(check: Check, parts: readonly CheckPart[], isWhole: boolean): string[] {
  const sentences = isWhole ? [check.sentence] : parts.map((part) => part.sentence);
  const remedies = isWhole ? [check.remedy] : parts.map((part) => part.remedy ?? check.remedy);
  const toDo = [...new Set(remedies)].filter((remedy) => remedy !== "").map((remedy) => `What to do: ${remedy}`);
  return sentences.length === 0 ? [] : [...sentences, ...toDo];
}

function emptyArms(plan: Plan, reduction: Reduction): string[] {
  const analysed = reduction.unitLines.find((line) => line.id === "analysed")?.byVariant ?? [];
  const empty = plan.variants.filter((_, i) => (analysed[i] ?? 0) === 0).map(({ name }) => quoted(name));
  if (empty.length === 0) return [];
  return [`No ${plan.unitCalled.one} with ${list(empty, "or")} was counted, so there is nothing to compare.`];
}
