import type { Reduction } from "../engine/types.ts";
import type { Filter, Plan } from "../plan/types.ts";
import { plural, quoted } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { rowsOn, unitsOn } from "./ledger.ts";
import type { Check, CheckPart } from "./types.ts";
import { groups, perVariant, units } from "./words.ts";

/** Filters that removed nothing, and filters that look past enrolment, one part a filter. */
export function filters(plan: Plan, reduction: Reduction): Check | null {
  return asCheck(
    "filters",
    plan.filters.map((filter) => judge(plan, reduction, filter)),
    {},
  );
}

function judge(plan: Plan, reduction: Reduction, filter: Filter): Finding {
  const { sentence, removed, figures } = whatItDid(plan, reduction, filter);
  const past = filter.drop === "units" && "when" in filter && filter.when === "ever";
  if (removed > 0 && !past) return passed(filter.name, sentence, figures);
  const { many, one } = plan.unitCalled;
  const looks = past ? " It looks past enrolment, so the variant can change who is removed." : "";
  const remedies = [
    removed === 0
      ? `Check the filter ${quoted(filter.name)}: its column and values may be written otherwise in the log.`
      : "",
    past
      ? `Judge each ${one} by what was known at enrolment (when: at-enrolment), so that the same ${many} are removed whatever the variant.`
      : "",
  ];
  return {
    about: filter.name,
    result: "caution",
    strong: false,
    sentence: sentence + looks,
    remedy: remedies.filter((text) => text !== "").join(" "),
    figures: { ...figures, looksPastEnrolment: past },
  };
}

function whatItDid(plan: Plan, reduction: Reduction, filter: Filter) {
  const name = `The filter ${quoted(filter.name)}`;
  if (filter.drop === "rows") {
    const rows = rowsOn(reduction, `filter:${filter.name}`);
    const sentence = rows === 0 ? `${name} removed nothing.` : `${name} removed ${plural(rows, "row", "rows")}.`;
    return { sentence, removed: rows, figures: { rows } satisfies CheckPart["figures"] };
  }
  const line = unitsOn(reduction, `filter:${filter.name}`);
  const byVariant = line.byVariant === null ? {} : { byVariant: perVariant(plan, line.byVariant) };
  const who = line.byVariant === null ? units(plan, line.units) : groups(plan, line.byVariant);
  const sentence = line.units === 0 ? `${name} removed nothing.` : `${name} removed ${who}.`;
  return { sentence, removed: line.units, figures: { units: line.units, ...byVariant } satisfies CheckPart["figures"] };
}
