import type { Aggregate, Metric } from "../../../src/plan/types.ts";
import { adjustedOf } from "../../oracle/adjusted.ts";
import { DAY_US, partMatches } from "../../oracle/span.ts";
import type { Row } from "../../oracle/types.ts";
import { count, endedRows, type Rules, type Seen } from "./seen.ts";

const AGGREGATES: Aggregate["kind"][] = ["count", "days", "sum", "max", "min", "first", "last"];

/** Metrics adjusted for their own past, and rows that they would count, with how long before enrolment these lie. */
function past(seen: Seen): { metric: Metric; days: number; rows: { row: Row; beforeUs: bigint }[] }[] {
  const enrolled = new Map(
    seen.trace.units.filter(({ line }) => line === "analysed").map(({ unit, enrolledUs }) => [unit, enrolledUs]),
  );
  return seen.plan.metrics.flatMap((metric) => {
    if (metric.adjustFor?.kind !== "days-before") return [];
    const rows = endedRows(seen).flatMap(({ row, line }) => {
      const at = enrolled.get(row.unit ?? "");
      const isNear = line === "before-enrolment" || line === "in-follow-up";
      if (!isNear || at == null || row.us === null || !partMatches(metric.of, row)) return [];
      return [{ row, beforeUs: at - row.us }];
    });
    return [{ metric, days: metric.adjustFor.days, rows }];
  });
}

const lengthUs = (days: number) => BigInt(Math.round(days * Number(DAY_US)));

const inside = (seen: Seen, wanted: (metric: Metric) => boolean) =>
  past(seen)
    .filter(({ metric }) => wanted(metric))
    .reduce(
      (sum, { days, rows }) => sum + count(rows, ({ beforeUs }) => beforeUs > 0n && beforeUs <= lengthUs(days)),
      0,
    );

const values = (seen: Seen, wanted: (metric: Metric) => boolean) =>
  seen.plan.metrics
    .filter(wanted)
    .flatMap(({ name }) => seen.trace.result.metrics.filter(({ metric }) => metric === name));

const ofColumn = ({ adjustFor }: Metric) => adjustFor?.kind === "column";

export const covariateRules: Rules = {
  ...Object.fromEntries(
    AGGREGATES.map((kind) => [
      `days before: ${kind}`,
      (seen: Seen) => inside(seen, ({ summary, of }) => summary === "mean" && of.aggregate.kind === kind),
    ]),
  ),
  "days before: proportion": (seen) => inside(seen, ({ summary }) => summary === "proportion"),
  "days before: a row at their first instant": (seen) =>
    past(seen).reduce((sum, { days, rows }) => sum + count(rows, ({ beforeUs }) => beforeUs === lengthUs(days)), 0),
  "days before: a row too early": (seen) =>
    past(seen).reduce((sum, { days, rows }) => sum + count(rows, ({ beforeUs }) => beforeUs > lengthUs(days)), 0),
  "days before: a row at the moment of enrolment": (seen) =>
    past(seen).reduce((sum, { rows }) => sum + count(rows, ({ beforeUs }) => beforeUs === 0n), 0),
  "days before: no row": (seen) =>
    count(
      values(seen, ({ adjustFor, summary }) => adjustFor?.kind === "days-before" && summary === "mean"),
      (metric) => metric.values.some(({ x }) => x === 0n) && metric.values.some(({ x }) => x !== 0n),
    ),
  "days before: rows of which none has a number": (seen) =>
    count(past(seen), ({ metric: { of }, rows }) => {
      const { aggregate } = of;
      if (!("column" in aggregate)) return false;
      const before = rows.filter(({ beforeUs }) => beforeUs > 0n).map(({ row }) => row);
      return before.some(({ unit }) =>
        before.every((row) => row.unit !== unit || row.number(aggregate.column) === null),
      );
    }),
  "covariate column": (seen) => count(values(seen, ofColumn), (metric) => metric.values.some(({ x }) => x !== null)),
  "covariate column, missing for some": (seen) =>
    count(
      values(seen, ofColumn),
      (metric) => metric.values.some(({ x }) => x !== null) && metric.values.some(({ x }) => x === null),
    ),
  "covariate column, missing for all": (seen) =>
    count(values(seen, ofColumn), (metric) => metric.values.length > 0 && metric.values.every(({ x }) => x === null)),
  "covariate above the metric's cap": (seen) =>
    count(
      values(seen, ({ cap }) => cap !== null),
      ({ cap, values: units }) => cap !== null && units.some(({ x }) => x !== null && x > cap.value),
    ),
  "covariate of a metric that leaves units out": (seen) =>
    count(
      values(seen, ({ adjustFor }) => adjustFor !== null),
      ({ leftOut, values: units }) => leftOut.some((n) => n > 0) && units.some(({ x }) => x !== null),
    ),
  "one column for two metrics": ({ plan }) =>
    new Set(plan.metrics.filter(ofColumn).map(({ adjustFor }) => JSON.stringify(adjustFor))).size <
    plan.metrics.filter(ofColumn).length,
  "two columns for two metrics, the second of the plan first": ({ plan }) => {
    const columns = plan.metrics.flatMap(({ adjustFor }) => (adjustFor?.kind === "column" ? [adjustFor.column] : []));
    return columns.some((column, at) =>
      columns.slice(at + 1).some((later) => plan.columns.indexOf(later) < plan.columns.indexOf(column)),
    );
  },
  "a contrast that can be adjusted": ({ plan, trace }) =>
    count(trace.result.metrics, ({ metric, values: units }) => {
      if (plan.metrics.every(({ name, adjustFor }) => name !== metric || adjustFor === null)) return false;
      const arm = (variant: number) => units.filter((unit) => unit.variant === variant);
      return plan.variants.some((_, at) => at > 0 && adjustedOf(arm(0), arm(at)) !== null);
    }),
};
