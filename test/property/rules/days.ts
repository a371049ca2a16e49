import type { Metric } from "../../../src/plan/types.ts";
import type { OracleMetric } from "../../oracle/types.ts";
import { count, type Rules, type Seen } from "./seen.ts";

type Since = NonNullable<OracleMetric["since"]>;

/** Metrics that are told by day since enrolment, of which some unit did something on a later day than the first. */
const told = ({ plan, trace }: Seen, wanted: (metric: Metric, since: Since) => boolean): number =>
  count(plan.metrics, (metric) => {
    const since = trace.result.metrics.find((found) => found.metric === metric.name)?.since ?? null;
    const later = since?.units.some(({ of }) => of.slice(1).some((value) => value !== 0n)) ?? false;
    return since !== null && later && wanted(metric, since);
  });

export const dayRules: Rules = {
  ...Object.fromEntries(
    (["count", "sum", "days"] as const).map((kind) => [
      `by day since enrolment: mean of ${kind}`,
      (seen: Seen) => told(seen, ({ summary, of }) => summary === "mean" && of.aggregate.kind === kind),
    ]),
  ),
  "by day since enrolment: a proportion": (seen) => told(seen, ({ summary }) => summary === "proportion"),
  "by day since enrolment: a ratio with something to divide by on every day": (seen) =>
    told(
      seen,
      ({ summary }, { days, units }) =>
        summary === "ratio-of-totals" &&
        Array.from({ length: days }, (_, day) => day).every((day) =>
          units.some(({ per }) => (per?.[day] ?? 0n) !== 0n),
        ),
    ),
  "by day since enrolment: a cap that a later day reaches": (seen) =>
    told(seen, ({ name, cap }, { units }) => {
      const found = seen.trace.result.metrics.find(({ metric }) => metric === name)?.cap;
      return (
        cap !== null &&
        units.some(
          ({ of }) =>
            of.slice(1).some((value) => value !== 0n) &&
            found != null &&
            of.reduce((a, b) => a + b, 0n) === found.value,
        )
      );
    }),
  "by day since enrolment: a unit that was kept but not followed to the end": (seen) =>
    told(
      seen,
      ({ name }, { units }) =>
        seen.plan.followUp?.incomplete === "keep" &&
        (seen.trace.result.metrics.find(({ metric }) => metric === name)?.values.length ?? 0) > units.length,
    ),
  "units enrolled on several days": ({ trace }) => trace.result.facts.analysedByDay.length > 1,
};
