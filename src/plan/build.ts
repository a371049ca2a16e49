import { askedAfterwards, orderedColumns, planned } from "./columns.ts";
import { decimalOf, parsePercent } from "./number.ts";
import type { AmountYaml, MetricYaml, PartYaml, PlanYaml } from "./schema.ts";
import type { PlanSource } from "./source.ts";
import { parseTime, timeZoneNamed } from "./time.ts";
import type { Aggregate, Amount, DecimalText, Filter, LogSource, Metric, Part, Plan } from "./types.ts";
import { whereTests } from "./where.ts";
import { decimalAt, type Path } from "./yaml.ts";

/** The plan for the other rooms, from YAML that the schema and all rules have passed. */
export function buildPlan(plan: PlanYaml, source: PlanSource): Plan {
  const timezone = known(timeZoneNamed(plan.timezone), "time zone");
  const { event, from, before } = plan.enrolment;
  return {
    experiment: plan.experiment,
    question: plan.question,
    unitCalled: plan["unit-called"],
    log: plan.log.map(logSource),
    timezone,
    enrolment: {
      event: event ?? null,
      fromUs: from === undefined ? null : known(parseTime(from, timezone), "time"),
      beforeUs: before === undefined ? null : known(parseTime(before, timezone), "time"),
      fromText: from ?? null,
      beforeText: before ?? null,
      inTwoVariants: plan.enrolment["in-two-variants"],
    },
    variants: plan.variants.map(({ name, what, control, allocation }) => ({
      name,
      what: what ?? null,
      isControl: control,
      allocation: typeof allocation === "number" ? allocation : Number(shareText(allocation)),
    })),
    followUp: plan["follow-up"] ?? null,
    metrics: plan.metrics.map((metric, i) => builtMetric(metric, ["metrics", i], source)),
    filters: plan.filters.map((filter, i) => builtFilter(filter, ["filters", i], source)),
    subgroups: plan.subgroups,
    decision: {
      confidence: Number(shareText(plan.decision.confidence)),
      power: Number(shareText(plan.decision.power)),
      adoptWhen: plan.decision["adopt-when"],
      primaries: plan.decision.primaries,
      interval: plan.decision.interval,
    },
    plannedUnits: plan.planned?.units ?? null,
    looks:
      plan.looks === undefined
        ? null
        : {
            planned: plan.looks.planned.map((share) => Number(shareText(share))),
            at: plan.looks.at,
            spending: plan.looks.spending,
            reached: null,
          },
    incidents: plan.incidents.map(({ name, what, from, before, where }, i) => ({
      name,
      what: what ?? null,
      fromUs: known(parseTime(from, timezone), "time"),
      beforeUs: known(parseTime(before, timezone), "time"),
      fromText: from,
      beforeText: before,
      where: whereTests(where, ["incidents", i, "where"], source.yaml),
    })),
    forecast: plan.forecast === undefined ? null : { unitsPerMonth: plan.forecast["units-per-month"] },
    registered:
      plan.registered === undefined
        ? null
        : {
            on: plan.registered.on,
            where: plan.registered.where ?? null,
            fingerprint: plan.registered.fingerprint,
          },
    texts: {
      ended: plan.ended ?? null,
      owner: plan.owner ?? null,
      link: plan.link ?? null,
      limits: plan.limits ?? null,
      notes: plan.notes ?? null,
      decided:
        plan.decided === undefined
          ? null
          : {
              what: plan.decided.what,
              by: plan.decided.by ?? null,
              on: plan.decided.on ?? null,
              because: plan.decided.because ?? null,
            },
    },
    askedAfterwards: {
      subgroups: plan["asked-afterwards"].subgroups,
      metrics: plan["asked-afterwards"].metrics.map((metric, i) =>
        builtMetric({ ...metric, role: "secondary" }, ["asked-afterwards", "metrics", i], source),
      ),
      ...orderedColumns(askedAfterwards(source.mentions)),
    },
    ...orderedColumns(planned(source.mentions)),
  };
}

export function logSource({ files, columns }: PlanYaml["log"][number]): LogSource {
  return {
    files: [files].flat(),
    columns: {
      unit: columns.unit,
      time: columns.time ?? null,
      event: columns.event ?? null,
      variant: columns.variant ?? null,
      eventId: columns["event-id"] ?? null,
    },
  };
}

function builtMetric(metric: MetricYaml, path: Path, source: PlanSource): Metric {
  const { name, role, summary, of, per, quantile, cap } = metric;
  return {
    name,
    role,
    summary,
    of: builtPart(of, [...path, "of"], source),
    per: per === undefined ? null : builtPart(per, [...path, "per"], source),
    quantile: quantile === undefined ? null : exactShare(quantile, [...path, "quantile"], source),
    unitOfMeasure: metric.in ?? null,
    goodIs: metric["good-is"],
    worthwhile: builtAmount(metric.worthwhile),
    expected: builtAmount(metric.expected),
    margin: builtAmount(metric.margin),
    cap:
      cap === undefined
        ? null
        : cap.quantile === undefined
          ? { kind: "at", at: known(decimalAt(source.yaml, [...path, "cap", "at"]), "cap") }
          : { kind: "quantile", q: exactShare(cap.quantile, [...path, "cap", "quantile"], source) },
    adjustFor: builtCovariate(metric["adjust-for"]),
    withoutRows: metric["without-rows"] === "leave-out" ? "leave-out" : "zero",
  };
}

function builtPart(part: PartYaml, path: Path, source: PlanSource): Part {
  return {
    event: part.event ?? null,
    where: whereTests(part.where, [...path, "where"], source.yaml),
    aggregate: builtAggregate(part),
  };
}

function builtAggregate(part: PartYaml): Aggregate {
  if (part.days !== undefined) return { kind: "days" };
  for (const kind of ["sum", "max", "min", "first", "last"] as const) {
    const column = part[kind];
    if (column !== undefined) return { kind, column };
  }
  return { kind: "count" };
}

function builtCovariate(covariate: MetricYaml["adjust-for"]): Metric["adjustFor"] {
  if (covariate === undefined) return null;
  const { "days-before": days, column } = covariate;
  return days === undefined
    ? { kind: "column", column: known(column ?? null, "covariate") }
    : { kind: "days-before", days };
}

function builtAmount(amount: AmountYaml | undefined): Amount | null {
  if (amount === undefined) return null;
  const { relative, absolute } = amount;
  if (relative !== undefined) return { kind: "relative", value: Number(shareText(relative)) };
  return { kind: "absolute", value: Number(shareText(known(absolute ?? null, "amount"))) };
}

function builtFilter(filter: PlanYaml["filters"][number], path: Path, source: PlanSource): Filter {
  const { name, drop } = filter;
  const why = filter.why ?? null;
  const listedIn = filter["listed-in"];
  if (listedIn !== undefined) return { name, why, drop: "units", listedIn };
  const where = whereTests(filter.where, [...path, "where"], source.yaml);
  return drop === "rows" ? { name, why, drop, where } : { name, why, drop, when: filter.when ?? "at-enrolment", where };
}

/** A share as decimal text: of a percentage exactly, of a number the shortest text of its double. */
function shareText(share: number | string): DecimalText {
  return typeof share === "number" ? decimalOf(share) : known(parsePercent(share), "percentage");
}

/** A share with the digits of the plan's text. */
function exactShare(share: number | string, path: Path, source: PlanSource): DecimalText {
  return typeof share === "number" ? known(decimalAt(source.yaml, path), "share") : shareText(share);
}

function known<T>(value: T | null, what: string): T {
  if (value === null) throw new Error(`a plan without a readable ${what} passed its rules`);
  return value;
}
