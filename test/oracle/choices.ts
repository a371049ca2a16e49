import type { Plan } from "../../src/plan/types.ts";
import { nanoText } from "./number.ts";
import { trace } from "./oracle.ts";
import { clockOf } from "./time.ts";
import type { Lists, OracleMetric, RawFile } from "./types.ts";
import { isIn } from "./units.ts";

/**
 * METHODS 6 read as what it says: the same log under a plan that makes another choice. Each choice is the whole oracle,
 * run again; nothing is added to or taken from the plan's own figures.
 */
export type OracleChoice =
  | "no-cap"
  | "cap-0.99"
  | "cap-0.999"
  | "other-way-in-two-variants"
  | "any-follow-up"
  | "without-first-day"
  | `without-incident:${string}`;

/** Null where the plan leaves no such choice. */
export function underChoice(
  choice: OracleChoice,
  plan: Plan,
  files: readonly RawFile[],
  lists: Lists,
): readonly OracleMetric[] | null {
  const metrics = (other: Plan) => trace(other, files, lists).result.metrics;
  switch (choice) {
    case "no-cap":
      return metrics(withCaps(plan, () => null));
    case "cap-0.99":
    case "cap-0.999":
      return metrics(withCaps(plan, () => ({ kind: "quantile", q: choice.slice("cap-".length) })));
    case "other-way-in-two-variants": {
      const inTwoVariants = plan.enrolment.inTwoVariants === "first" ? "exclude" : "first";
      return metrics({ ...capsHeld(plan, files, lists), enrolment: { ...plan.enrolment, inTwoVariants } });
    }
    case "any-follow-up":
      return plan.followUp === null
        ? null
        : metrics({ ...capsHeld(plan, files, lists), followUp: { ...plan.followUp, incomplete: "keep" } });
    case "without-first-day":
      return withoutFirstDay(plan, files, lists);
    default:
      return withoutIncident(choice, plan, files, lists);
  }
}

type Cap = Plan["metrics"][number]["cap"];

/** Only means and ratios have caps. */
const withCaps = (plan: Plan, capOf: (metric: OracleMetric["metric"]) => Cap): Plan => ({
  ...plan,
  metrics: plan.metrics.map((metric) =>
    metric.summary === "mean" || metric.summary === "ratio-of-totals" ? { ...metric, cap: capOf(metric.name) } : metric,
  ),
});

/** A choice of units leaves the cap where the plan's own units put it. */
function capsHeld(plan: Plan, files: readonly RawFile[], lists: Lists): Plan {
  const own = trace(plan, files, lists).result.metrics;
  return withCaps(plan, (name) => {
    const cap = own.find(({ metric }) => metric === name)?.cap ?? null;
    return cap === null ? null : { kind: "at", at: nanoText(cap.value) };
  });
}

function withoutFirstDay(plan: Plan, files: readonly RawFile[], lists: Lists): readonly OracleMetric[] | null {
  const { result, units } = trace(plan, files, lists);
  const clock = clockOf(plan.timezone);
  const days = new Map(
    units.flatMap(({ unit, line, enrolledUs }) =>
      line === "analysed" && enrolledUs !== null ? [[unit, clock.day(enrolledUs)] as const] : [],
    ),
  );
  if (days.size === 0) return null;
  const first = Math.min(...days.values());
  return result.metrics.map((metric) => ({
    ...metric,
    values: metric.values.filter(({ unit }) => days.get(unit) !== first),
  }));
}

/** Without the units whose enrolling row falls into the incident. */
function withoutIncident(
  choice: `without-incident:${string}`,
  plan: Plan,
  files: readonly RawFile[],
  lists: Lists,
): readonly OracleMetric[] | null {
  const incident = plan.incidents.find(({ name }) => choice === `without-incident:${name}`);
  if (incident === undefined) return null;
  const { result, units } = trace(plan, files, lists);
  const struck = new Set(units.filter((unit) => isIn(incident, unit)).map(({ unit }) => unit));
  return result.metrics.map((metric) => ({
    ...metric,
    values: metric.values.filter(({ unit }) => !struck.has(unit)),
  }));
}
