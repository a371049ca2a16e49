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
  return [...failures(plan, checks).flatMap(({ check, parts }) => told(check, parts)), ...emptyArms(plan, reduction)];
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

function told(check: Check, parts: readonly CheckPart[]): string[] {
  const sentences = parts.length === 0 ? [check.sentence] : parts.map((part) => part.sentence);
  return check.remedy === "" ? sentences : [...sentences, `What to do: ${check.remedy}`];
}

function emptyArms(plan: Plan, reduction: Reduction): string[] {
  const analysed = reduction.unitLines.find((line) => line.id === "analysed")?.byVariant ?? [];
  const empty = plan.variants.filter((_, i) => (analysed[i] ?? 0) === 0).map(({ name }) => quoted(name));
  if (empty.length === 0) return [];
  return [`No ${plan.unitCalled.one} with ${list(empty, "or")} was counted, so there is nothing to compare.`];
}
