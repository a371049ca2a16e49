import type { Plan } from "../plan/types.ts";
import { count, list, plural, quoted } from "../words/index.ts";
import { controlOf } from "./effects.ts";
import type { IncidentOutcome } from "./incidents.ts";

/** Of one incident, after how many enrolled during it: whether the decision depends on it. */
export function incidentSentences(plan: Plan, outcome: IncidentOutcome, isDecided: boolean): string[] {
  const { many } = plan.unitCalled;
  const { units, without } = outcome;
  const all = units.reduce((sum, n) => sum + n, 0);
  if (all === 0) return [`None of the ${many} counted enrolled during it, so nothing depends on it.`];
  const enrolled = `${enrolledText(plan, units)} enrolled during it.`;
  if (!isDecided) return [enrolled];
  if (without === null)
    return [enrolled, "Without them a group would be left with nobody, so what depends on it cannot be told."];
  return [enrolled, dependsText(plan, outcome), ...quantiles(plan)];
}

/** For page one: "The decision does not depend on it." */
export function incidentsInShort(outcomes: readonly IncidentOutcome[], isDecided: boolean): string {
  const names = outcomes.map(({ incident }) => quoted(incident.name));
  const told = outcomes.filter(({ units, without }) => without !== null || units.every((n) => n === 0));
  const others = outcomes.filter(({ isOther }) => isOther).map(({ incident }) => quoted(incident.name));
  const it = outcomes.length === 1 ? "it" : "them";
  const depends =
    others.length > 0
      ? ` The decision depends on ${outcomes.length === 1 ? "it" : list(others)}.`
      : isDecided && told.length === outcomes.length
        ? ` The decision does not depend on ${it}.`
        : "";
  return `${list(names)}.${depends} More in section 3.`;
}

/** '412 visitors with "list" and 405 with "calendar"'. */
function enrolledText({ variants, unitCalled }: Plan, units: readonly number[]): string {
  const each = variants.map(({ name }, v) => {
    const n = units[v] ?? 0;
    return `${v === 0 ? plural(n, unitCalled.one, unitCalled.many) : count(n)} with ${quoted(name)}`;
  });
  return list(each);
}

function dependsText(plan: Plan, { without, isOther, elsewhere }: IncidentOutcome): string {
  if (without === null) throw new Error("no decision without an incident to tell of");
  if (isOther) return `The decision depends on it: without them it would be ${decisionInWords(plan, without)}.`;
  const though = elsewhere.length === 0 ? "" : `, though ${list(elsewhere)} would stand elsewhere (section 5)`;
  return `The decision does not depend on it: without them it would be the same${though}.`;
}

function decisionInWords(plan: Plan, { decision, variant }: NonNullable<IncidentOutcome["without"]>): string {
  switch (decision) {
    case "adopt":
      return `to adopt ${quoted(variant ?? "")}`;
    case "keep-control":
      return `to stay with ${quoted(controlOf(plan).name)}`;
    case "not-settled":
      return "not settled";
  }
}

/** Quantiles are not worked out under other choices. */
function quantiles({ metrics }: Plan): string[] {
  const names = metrics.filter(({ role, summary }) => role !== "secondary" && summary === "quantile");
  if (names.length === 0) return [];
  const stand = names.length === 1 ? "stands" : "stand";
  return [
    `${list(names.map(({ name }) => name))} ${stand} in that as with them, since quantiles are not worked out anew.`,
  ];
}
