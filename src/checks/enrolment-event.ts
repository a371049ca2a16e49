import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, list, percent, quoted } from "../words/index.ts";
import { type Finding, passed } from "./finding.ts";
import { sum } from "./ledger.ts";
import { ENROLLED_BY_METRIC_ROWS_OVER } from "./limits.ts";
import { units } from "./words.ts";

/**
 * Without an enrolment event any row that names a variant enrols, also one that a metric counts: then a unit may have seen
 * its variant before, and who is enrolled can depend on what the variant made them do. A part of `filters`.
 */
export function enrolmentEvent(plan: Plan, { facts }: Reduction): Finding | null {
  const found = facts.soundness.byMetricRows;
  const enrolled = sum(facts.enrolled);
  if (found === null || enrolled === 0) return null;
  const share = found.units / enrolled;
  const figures = { units: found.units, share };
  const were = found.units === 1 ? "was" : "were";
  const sentence = `The plan names no enrolment event: ${units(plan, found.units)} of ${count(enrolled)} (${percent(share)}) ${were} enrolled by a row that a measure counts`;
  if (share <= ENROLLED_BY_METRIC_ROWS_OVER) return passed("enrolment event", `${sentence}.`, figures);
  const events = found.events.map(({ value }) => quoted(value));
  return {
    about: "enrolment event",
    result: "caution",
    strong: false,
    sentence: `${sentence}${events.length === 0 ? "" : ` (${list(events)})`}, so the variant can change who is enrolled.`,
    remedy: `Name the event at which ${plan.unitCalled.many} meet their variant (enrolment: {event: …}), so that what they do afterwards does not enrol them.`,
    figures,
  };
}
