import type { Reduction } from "../engine/types.ts";
import type { Filter, Plan } from "../plan/types.ts";
import { list, plural, quoted } from "../words/index.ts";
import { armsAlike } from "./arms.ts";
import { enrolmentEvent } from "./enrolment-event.ts";
import { asCheck, type Finding } from "./finding.ts";
import { looksPast } from "./flow.ts";
import { rowsOn, sum, unitsOn } from "./ledger.ts";
import type { Check, CheckPart } from "./types.ts";
import { groupShares, groups, ofDifference, perVariant, units } from "./words.ts";

/**
 * Filters that removed nothing, that look past enrolment, or that drop rows by which units enrol, one part a filter; and, in
 * a plan without an enrolment event, units that a row enrolled which some metric counts.
 */
export function filters(plan: Plan, reduction: Reduction): Check | null {
  const event = enrolmentEvent(plan, reduction);
  return asCheck(
    "filters",
    [...plan.filters.map((filter) => judge(plan, reduction, filter)), ...(event === null ? [] : [event])],
    {},
  );
}

/** Something to say of a filter; what needs no remedy is no fault. */
interface Note {
  readonly sentence: string;
  readonly remedy: string;
  readonly figures: CheckPart["figures"];
}

function judge(plan: Plan, reduction: Reduction, filter: Filter): Finding {
  const did = whatItDid(plan, reduction, filter);
  const faults = [
    ...(did.removed > 0 ? [] : [idle(reduction, filter)]),
    ...(filter.drop === "units" ? past(plan, filter) : enrolling(plan, reduction, filter)),
  ];
  return {
    about: filter.name,
    result: faults.length === 0 ? "pass" : "caution",
    strong: false,
    sentence: [did.sentence, ...faults.map(({ sentence }) => sentence)].filter((text) => text !== "").join(" "),
    remedy: faults.map(({ remedy }) => remedy).join(" "),
    figures: Object.assign({}, did.figures, ...faults.map(({ figures }) => figures)),
  };
}

function idle({ facts }: Reduction, filter: Filter): Note {
  const name = quoted(filter.name);
  if ("listedIn" in filter) {
    return {
      sentence: "",
      remedy: `Check the filter ${name}: its ids may be written otherwise in the log.`,
      figures: {},
    };
  }
  const columns = facts.soundness.valuesOfFilters.find((one) => one.filter === filter.name)?.columns ?? [];
  const found = columns.map(({ column, values }) => {
    const texts = values.map(({ value, rows }) => `${quoted(value)} (${plural(rows, "row", "rows")})`);
    return texts.length === 0
      ? `${quoted(column)} is empty in every row.`
      : `In ${quoted(column)} the commonest values are ${list(texts)}.`;
  });
  return {
    sentence: found.join(" "),
    remedy: `Check the filter ${name}: its column and values may be written otherwise in the log.`,
    figures: {
      ...(columns.length === 0
        ? {}
        : {
            values: Object.fromEntries(
              columns.map(({ column, values }) => [
                column,
                Object.fromEntries(values.map(({ value, rows }) => [value, rows])),
              ]),
            ),
          }),
    },
  };
}

function past(plan: Plan, filter: Filter): Note[] {
  const isPast = looksPast(plan, `filter:${filter.name}`);
  const { many, one } = plan.unitCalled;
  if (!isPast) return [];
  return [
    {
      sentence: "It looks past enrolment, so the variant can change who is removed.",
      remedy: `Judge each ${one} by what was known at enrolment (when: at-enrolment), so that the same ${many} are removed whatever the variant.`,
      figures: { looksPastEnrolment: true },
    },
  ];
}

/** A row filter that takes the rows by which units are enrolled decides who is in the test, and when. */
function enrolling(plan: Plan, { facts }: Reduction, filter: Filter): Note[] {
  const place = plan.filters.filter(({ drop }) => drop === "rows").indexOf(filter);
  const { units: outOf, taken } = facts.soundness.enrolling;
  const having = taken[place] ?? [];
  if (sum(having) === 0) return [];
  const p = armsAlike(having, outOf);
  const { many } = plan.unitCalled;
  return [
    {
      sentence: `It took rows that enrol ${many}: of ${groupShares(plan, having, outOf)}. They are enrolled by a later row, or not at all.${p === null ? "" : ` ${ofDifference(p)}`}`,
      remedy: `Let the filter ${quoted(filter.name)} spare the enrolling rows, or let it drop the ${many} themselves, so that it shows who is left out.`,
      figures: { enrolling: perVariant(plan, having), ...(p === null ? {} : { p }) },
    },
  ];
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
