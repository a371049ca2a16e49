import { type IncidentOutcome, incidentOutcomes, incidentSentences } from "../../decision/index.ts";
import type { Incident } from "../../plan/types.ts";
import { asSentence, capital, list, quoted } from "../../words/index.ts";
import type { ReportInputs } from "../types.ts";

/** The end of section 3: what happened while units enrolled, and whether the decision depends on it. */
export interface IncidentText {
  readonly name: string;
  readonly when: string;
  /** What happened, from the plan; "" where it does not say. */
  readonly what: string;
  readonly sentences: string;
}

export function outcomesOf({ plan, effects, choices, conclusion, reduction }: ReportInputs): IncidentOutcome[] {
  return incidentOutcomes(plan, effects, choices, conclusion, reduction);
}

export function incidentTexts(inputs: ReportInputs): IncidentText[] {
  const isDecided = inputs.conclusion.decision !== "undecidable";
  return outcomesOf(inputs).map((outcome) => ({
    name: outcome.incident.name,
    when: whenAndWhere(outcome.incident),
    what: outcome.incident.what === null ? "" : capital(asSentence(outcome.incident.what)),
    sentences: incidentSentences(inputs.plan, outcome, isDecided).join(" "),
  }));
}

/** 'From 2026-03-04 08:00, before 2026-03-04 14:00; only where "country" is as the plan says': in the plan's own digits. */
function whenAndWhere({ fromText, beforeText, where }: Incident): string {
  const [from, before] = [fromText, beforeText].map((text) => text.replace("T", " "));
  const columns = [...new Set(where.map(({ column }) => quoted(column)))];
  const there =
    columns.length === 0 ? "" : `; only where ${list(columns)} ${columns.length === 1 ? "is" : "are"} as the plan says`;
  return `From ${from}, before ${before}${there}.`;
}
