import type { SourceHours } from "../engine/soundnessTypes.ts";
import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, dateSpan, dayOfEpoch, percent, plural } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { sum } from "./ledger.ts";
import type { Check } from "./types.ts";
import { entryName } from "./words.ts";

/**
 * Rows outside the span of their entry of the log, the run without a gap of more than 7 days that holds most of them: clocks
 * that are wrong, or rows of another test. They count as any other. One part an entry.
 */
export function span(plan: Plan, { facts }: Reduction): Check | null {
  const { sources } = facts.soundness;
  const outside = sum(sources.map((source) => source.outside));
  return asCheck(
    "span",
    sources.map((source) => judge(plan, source)),
    { rows: outside },
  );
}

function judge(plan: Plan, { source, outside, hours }: SourceHours): Finding {
  const inside = sum(hours.map(({ rows }) => rows));
  const [first, last] = [hours[0]?.day ?? 0, hours.at(-1)?.day ?? 0];
  const days = dateSpan(dayOfEpoch(first), dayOfEpoch(last));
  const about = plan.log.length === 1 ? "rows" : entryName(source);
  const of = plan.log.length === 1 ? "" : ` of ${entryName(source)}`;
  const figures = { rows: outside, share: outside / (inside + outside) };
  if (outside === 0) return passed(about, `All rows${of} lie in one run of days, ${days}.`, figures);
  const [lie, they] = outside === 1 ? ["lies", "It counts"] : ["lie", "They count"];
  return {
    about,
    result: "caution",
    strong: false,
    sentence: `${plural(outside, "row", "rows")} of ${count(inside + outside)}${of} (${percent(figures.share)}) ${lie} outside ${days}, where most rows are, with more than 7 days between. ${they} as any other.`,
    remedy:
      "Look whether these rows have a wrong time or belong to another test; if so, drop them with a filter of rows, or state when enrolment began and ended (enrolment: from, before).",
    figures,
  };
}
