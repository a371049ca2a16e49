import { canonicalOrder } from "../../oracle/order.ts";
import type { RejectReason, Row } from "../../oracle/types.ts";
import { enrols } from "../../oracle/units.ts";
import { holds } from "../../oracle/where.ts";
import { count, endedRows, parts, type Rules, type Seen, survivors } from "./seen.ts";

const ROW_LINES = [
  "rejected",
  "duplicate",
  "filter:",
  "unit-not-enrolled",
  "unit-outside-enrolment",
  "unit-unknown-variant",
  "unit-switched",
  "unit-filter:",
  "unit-follow-up",
  "before-enrolment",
  "after-follow-up",
  "in-follow-up",
];
const UNIT_LINES = [
  "not-enrolled",
  "outside-enrolment",
  "unknown-variant",
  "switched",
  "filter:",
  "follow-up",
  "analysed",
];
const REASONS: RejectReason[] = ["no-unit", "no-time", "bad-time", "not-a-number", "out-of-range"];

const rowLines: Rules = Object.fromEntries(
  ROW_LINES.map((line) => [
    `row line ${line}`,
    ({ trace }: Seen) => count(trace.ended, (row) => row.line.startsWith(line)),
  ]),
);
const unitLines: Rules = Object.fromEntries(
  UNIT_LINES.map((line) => [
    `unit line ${line}`,
    ({ trace }: Seen) => count(trace.units, (unit) => unit.line.startsWith(line)),
  ]),
);
const reasons: Rules = Object.fromEntries(
  REASONS.map((reason) => [
    `rejected: ${reason}`,
    ({ trace }: Seen) => count(trace.rows, (row) => row.rejected === reason),
  ]),
);

const rejection: Rules = {
  "rejected: a row that cannot be read": ({ files }) => files.reduce((sum, file) => sum + file.unreadable, 0),
  "rejected: a value of a row that no metric counts": (seen) =>
    count(
      seen.trace.rows,
      (row) =>
        row.rejected === "not-a-number" && parts(seen).every((part) => part.event !== null && part.event !== row.event),
    ),
  "rejected: a row of an enrolled unit": ({ trace }) => trace.result.facts.withRejected.reduce((a, b) => a + b, 0),
  "rejected: the only row with an event or variant of the plan": (seen) => {
    const { rows, result } = seen.trace;
    const kept = rows.filter((row) => row.rejected === null);
    const events = new Set(kept.map(({ event }) => event));
    const wanted = parts(seen).flatMap(({ event }) =>
      event === null || result.facts.missingEvents.includes(event) ? [] : [event],
    );
    return count(wanted, (event) => !events.has(event));
  },
};

const copies = (seen: Seen) => {
  const kept = endedRows(seen).filter(({ line, row }) => line !== "rejected" && row.eventId !== null);
  const groups = new Map<string, typeof kept>();
  for (const ended of kept) {
    const key = JSON.stringify([ended.row.source, ended.row.eventId]);
    groups.set(key, [...(groups.get(key) ?? []), ended]);
  }
  return [...groups.values()].filter((group) => group.length > 1);
};

const duplicates: Rules = {
  "copies that are equal": ({ trace }) => trace.result.facts.duplicateIds - trace.result.facts.copiesThatDiffer,
  "copies that differ": ({ trace }) => trace.result.facts.copiesThatDiffer,
  "copies of other units": ({ trace }) => trace.result.facts.copiesOfOtherUnits,
  "three copies or more": (seen) => count(copies(seen), (group) => group.length > 2),
  "the copy kept is not the first read": (seen) =>
    count(copies(seen), (group) =>
      group.some(({ line, at }) => line !== "duplicate" && at > Math.min(...group.map((ended) => ended.at))),
    ),
  "copies at one time, told apart by what follows in canonical order": (seen) =>
    count(copies(seen), ([first, ...others]) =>
      others.some((other) => other.row.us === first?.row.us && canonicalOrder(seen.plan)(other.row, first.row) !== 0),
    ),
  "a copy kept and then filtered": (seen) =>
    count(copies(seen), (group) => group.some(({ line }) => line.startsWith("filter:"))),
  "a duplicate that a row filter would take": (seen) =>
    count(
      endedRows(seen),
      ({ line, row }) =>
        line === "duplicate" &&
        seen.plan.filters.some((filter) => filter.drop === "rows" && holds(filter.where, row.cell)),
    ),
  "one id in two entries of the log": ({ trace }) => {
    const ids = new Map<string, Set<number>>();
    for (const { eventId, source } of trace.rows)
      if (eventId !== null) ids.set(eventId, (ids.get(eventId) ?? new Set()).add(source));
    return count([...ids.values()], (sources) => sources.size > 1);
  },
  "a row without an id where the source has ids": ({ plan, trace }) =>
    count(
      trace.rows,
      (row) => row.rejected === null && row.eventId === null && plan.log[row.source]?.columns.eventId !== null,
    ),
};

const enrolment: Rules = {
  "an enrolment event is asked for": ({ plan }) => plan.enrolment.event !== null,
  "any row that names a variant enrols": ({ plan }) => plan.enrolment.event === null,
  "two enrolling rows at one time, of two variants": (seen) =>
    count(seen.trace.units, ({ unit, enrolling }) => {
      const rows = enrollingRows(seen, unit);
      return rows.some((row) => row.us !== null && row.us === enrolling?.us && row.variant !== enrolling.variant);
    }),
  "the enrolling row is not the first read": (seen) =>
    count(seen.trace.units, ({ unit, enrolling }) => enrolling !== null && enrollingRows(seen, unit)[0] !== enrolling),
  "an unknown variant after the enrolling row": (seen) =>
    count(
      seen.trace.units,
      (unit) =>
        unit.variant !== null &&
        unit.variant >= 0 &&
        enrollingRows(seen, unit.unit).some((row) => row.variantIndex === -1),
    ),
  "a variant named without the enrolment event": (seen) =>
    count(survivors(seen), (row) => row.variant !== null && !enrols(seen.plan, row)),
  "outside although a later row lies inside": (seen) =>
    count(
      seen.trace.units,
      ({ unit, line }) => line === "outside-enrolment" && enrollingRows(seen, unit).some((row) => inside(seen, row)),
    ),
  "outside and of no variant of the plan": ({ trace }) =>
    count(trace.units, ({ line, variant }) => line === "outside-enrolment" && variant === -1),
  "enrolled exactly at from": ({ plan, trace }) =>
    count(trace.units, ({ enrolledUs }) => enrolledUs !== null && enrolledUs === plan.enrolment.fromUs),
  "enrolled exactly at before": ({ plan, trace }) =>
    count(trace.units, ({ enrolledUs }) => enrolledUs !== null && enrolledUs === plan.enrolment.beforeUs),
  "enrolled by another row once a filter took the first": (seen) =>
    count(seen.trace.units, ({ unit, enrolling }) => {
      const order = canonicalOrder(seen.plan);
      return endedRows(seen).some(
        ({ row, line }) =>
          row.unit === unit &&
          line.startsWith("filter:") &&
          enrolling !== null &&
          enrols(seen.plan, row) &&
          order(row, enrolling) < 0,
      );
    }),
  "switched, counted where first enrolled": ({ plan, trace }) =>
    plan.enrolment.inTwoVariants === "first" &&
    count(trace.units, ({ switched, line }) => switched && line === "analysed"),
  "switched by a row that does not enrol": (seen) =>
    count(
      seen.trace.units,
      ({ unit, switched }) => switched && new Set(enrollingRows(seen, unit).map((row) => row.variantIndex)).size < 2,
    ),
};

function enrollingRows(seen: Seen, unit: string): Row[] {
  return survivors(seen).filter((row) => row.unit === unit && enrols(seen.plan, row));
}

function inside({ plan }: Seen, { us }: Row): boolean {
  const { fromUs, beforeUs } = plan.enrolment;
  return us !== null && (fromUs === null || us >= fromUs) && (beforeUs === null || us < beforeUs);
}

export const ledgerRules: Rules = { ...rowLines, ...unitLines, ...reasons, ...rejection, ...duplicates, ...enrolment };
