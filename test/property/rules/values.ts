import type { Aggregate, Metric } from "../../../src/plan/types.ts";
import { readDecimal } from "../../oracle/number.ts";
import { partMatches } from "../../oracle/span.ts";
import type { OracleMetric } from "../../oracle/types.ts";
import { count, endedRows, parts, type Rules, type Seen } from "./seen.ts";

/** Metrics that some unit has a value of other than 0. */
const metricsOf = (seen: Seen, wanted: (metric: Metric) => boolean) =>
  count(
    seen.plan.metrics,
    (metric) =>
      wanted(metric) &&
      seen.trace.result.metrics.some(
        (found) => found.metric === metric.name && found.values.some(({ of }) => of !== 0n),
      ),
  );

const AGGREGATES: Aggregate["kind"][] = ["count", "days", "sum", "max", "min", "first", "last"];

const aggregates: Rules = {
  ...Object.fromEntries(
    AGGREGATES.map((kind) => [
      `mean of ${kind}`,
      (seen: Seen) => metricsOf(seen, ({ summary, of }) => summary === "mean" && of.aggregate.kind === kind),
    ]),
  ),
  ...Object.fromEntries(
    AGGREGATES.map((kind) => [
      `ratio of ${kind}`,
      (seen: Seen) => metricsOf(seen, ({ summary, of }) => summary === "ratio-of-totals" && of.aggregate.kind === kind),
    ]),
  ),
  ...Object.fromEntries(
    AGGREGATES.map((kind) => [
      `ratio per ${kind}`,
      (seen: Seen) => metricsOf(seen, ({ per }) => per?.aggregate.kind === kind),
    ]),
  ),
  proportion: (seen) => metricsOf(seen, ({ summary }) => summary === "proportion"),
  "a part without event and where": (seen) =>
    count(parts(seen), ({ event, where }) => event === null && where.length === 0),
  "first by time, a tie": (seen) => ties(seen, "first"),
  "last by time, a tie": (seen) => ties(seen, "last"),
  "a counted row without a number": ({ trace }) =>
    trace.result.metrics.reduce((sum, metric) => sum + metric.countedWithoutNumber, 0),
  "counted rows of which none has a number": (seen) =>
    count(parts(seen), (part) => {
      const { aggregate } = part;
      if (!("column" in aggregate)) return false;
      const rows = counted(seen).filter((row) => partMatches(part, row));
      return rows.some(({ unit }) => rows.every((row) => row.unit !== unit || row.number(aggregate.column) === null));
    }),
  "without rows: left out": ({ trace }) =>
    trace.result.metrics.reduce((sum, { leftOut }) => sum + leftOut.reduce((a, b) => a + b, 0), 0),
  "without rows: 0": (seen) =>
    count(
      seen.plan.metrics,
      ({ name, withoutRows }) =>
        withoutRows === "zero" &&
        seen.trace.result.metrics.some(({ metric, values }) => metric === name && values.some(({ of }) => of === 0n)),
    ),
  "a total below 0": ({ trace }) => count(trace.result.metrics, ({ values }) => values.some(({ of }) => of < 0n)),
  "a value rounded to nine places": (seen) =>
    count(seen.trace.rows, (row) =>
      seen.plan.numericColumns.some((column) => /\.\d{10}/.test(row.cell(column) ?? "") && row.rejected === null),
    ),
  "a value with an exponent": (seen) =>
    count(seen.trace.rows, (row) =>
      seen.plan.numericColumns.some((column) => /e/.test(row.cell(column) ?? "") && row.rejected === null),
    ),
  "a value of fifteen digits or more": (seen) =>
    count(
      seen.trace.rows,
      (row) =>
        row.rejected === null &&
        seen.plan.numericColumns.some((column) => (readDecimal(row.cell(column) ?? "")?.digits.length ?? 0) >= 15),
    ),
  "a ratio whose denominators sum to 0 in an arm": ({ plan, trace }) =>
    count(trace.result.metrics, ({ values }) =>
      plan.variants.some((_, at) => {
        const arm = values.filter(({ variant }) => variant === at);
        return (
          arm.length > 0 &&
          arm.every(({ per }) => per !== null) &&
          arm.reduce((sum, { per }) => sum + (per ?? 0n), 0n) === 0n
        );
      }),
    ),
  "a row that both sides of a ratio count": (seen) =>
    count(
      seen.plan.metrics,
      ({ of, per }) => per !== null && counted(seen).some((row) => partMatches(of, row) && partMatches(per, row)),
    ),
};

const counted = (seen: Seen) =>
  endedRows(seen)
    .filter(({ line }) => line === "in-follow-up")
    .map(({ row }) => row);

function ties(seen: Seen, kind: "first" | "last"): number {
  return count(parts(seen), (part) => {
    const { aggregate } = part;
    if (aggregate.kind !== kind) return false;
    const rows = counted(seen).filter((row) => partMatches(part, row) && row.number(aggregate.column) !== null);
    return rows.some((row) => {
      const same = rows.filter(({ unit }) => unit === row.unit);
      const times = same.map(({ us }) => us ?? 0n).sort((a, b) => (a < b ? -1 : 1));
      const foremost = kind === "first" ? times[0] : times.at(-1);
      return new Set(same.filter(({ us }) => us === foremost).map((other) => other.number(aggregate.column))).size > 1;
    });
  });
}

const caps: Rules = {
  "cap at, binding": (seen) => binding(seen, "at", "mean"),
  "cap quantile, binding": (seen) => binding(seen, "quantile", "mean"),
  "cap of a ratio, binding": (seen) =>
    binding(seen, "at", "ratio-of-totals") + binding(seen, "quantile", "ratio-of-totals"),
  "cap that changes nobody": ({ trace }) =>
    count(
      trace.result.metrics,
      ({ cap, values }) => values.length > 0 && cap !== null && cap.units.every((units) => units === 0),
    ),
  "cap quantile at a whole place": ({ plan, trace }) =>
    count(plan.metrics, ({ name, cap }) => {
      const n = trace.result.metrics.find(({ metric }) => metric === name)?.values.length ?? 0;
      return cap?.kind === "quantile" && n > 0 && Number.isInteger(Number((n * Number(cap.q)).toFixed(9)));
    }),
};

function binding(seen: Seen, kind: "at" | "quantile", summary: Metric["summary"]): number {
  return count(
    seen.plan.metrics,
    (metric) =>
      metric.cap?.kind === kind &&
      metric.summary === summary &&
      seen.trace.result.metrics.some(
        (found) => found.metric === metric.name && (found.cap?.units.some((units) => units > 0) ?? false),
      ),
  );
}

const quantiles: Rules = {
  ...Object.fromEntries(
    AGGREGATES.map((kind) => [
      `quantile of ${kind}`,
      (seen: Seen) => metricsOf(seen, ({ summary, of }) => summary === "quantile" && of.aggregate.kind === kind),
    ]),
  ),
  "quantile with both ends in every arm": (seen) =>
    countQuantiles(seen, (arms) => arms.every((arm) => arm !== null && arm.low !== null && arm.high !== null)),
  "quantile with one open end": (seen) =>
    countQuantiles(seen, (arms) => arms.some((arm) => arm !== null && (arm.low === null) !== (arm.high === null))),
  "quantile of an arm without values": (seen) => countQuantiles(seen, (arms) => arms.some((arm) => arm === null)),
  "quantile at an end, by ties": (seen) =>
    countQuantiles(seen, (arms) => arms.some((arm) => arm !== null && (arm.low === arm.at) !== (arm.high === arm.at))),
  "quantile without a width in an arm": (seen) =>
    countQuantiles(seen, (arms) => arms.some((arm) => arm !== null && arm.low === arm.at && arm.high === arm.at)),
  "quantile at a whole place": ({ plan, trace }) =>
    count(plan.metrics, ({ name, quantile }) => {
      const values = trace.result.metrics.find(({ metric }) => metric === name)?.values ?? [];
      return plan.variants.some((_, at) => {
        const n = count(values, ({ variant }) => variant === at);
        return quantile !== null && n > 0 && Number.isInteger(Number((n * Number(quantile)).toFixed(9)));
      });
    }),
  "quantile that decides": ({ plan }) =>
    count(plan.metrics, ({ quantile, role }) => quantile !== null && role !== "secondary"),
  "quantile that leaves units out": ({ plan, trace }) =>
    count(
      trace.result.metrics,
      ({ metric, leftOut }) =>
        leftOut.some((units) => units > 0) &&
        plan.metrics.some(({ name, quantile }) => name === metric && quantile !== null),
    ),
};

type Arms = NonNullable<OracleMetric["quantile"]>;

const countQuantiles = ({ trace }: Seen, wanted: (arms: Arms) => boolean): number =>
  count(trace.result.metrics, ({ quantile }) => quantile !== null && wanted(quantile));

const plans: Rules = {
  "a log without time": ({ plan }) => plan.log.every(({ columns }) => columns.time === null),
  "a log without event": ({ plan }) => plan.log.every(({ columns }) => columns.event === null),
  "two sources": ({ plan }) => plan.log.length === 2,
  "a source without variant": ({ plan }) => plan.log.some(({ columns }) => columns.variant === null),
  "two sources with other names": ({ plan }) => new Set(plan.log.map(({ columns }) => columns.unit)).size > 1,
  "three variants": ({ plan }) => plan.variants.length === 3,
  "an event of the plan that never occurs": ({ trace }) => trace.result.facts.missingEvents.length,
  "a variant of the plan that never occurs": ({ trace }) => trace.result.facts.missingVariants.length,
  "nobody analysed": ({ trace }) => trace.units.every(({ line }) => line !== "analysed"),
  "two units of one variant analysed": ({ plan, trace }) =>
    plan.variants.some((_, at) => count(trace.units, ({ line, variant }) => line === "analysed" && variant === at) > 1),
};

export const valueRules: Rules = { ...aggregates, ...caps, ...quantiles, ...plans };
