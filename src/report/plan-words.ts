import { Temporal } from "temporal-polyfill";
import type { Reduction } from "../engine/types.ts";
import type { Metric, Part, Plan, Variant } from "../plan/types.ts";
import { count, type Day, dateSpan, list, percentile, plain, plural, quoted } from "../words/index.ts";

export function controlOf(plan: Plan): Variant {
  const control = plan.variants.find((variant) => variant.isControl);
  if (control === undefined) throw new Error("the plan has no control");
  return control;
}

/** "2 to 15 March 2026, each visitor followed for 7 days": when counted units were enrolled, in the plan's zone. */
export function whenText(plan: Plan, { facts }: Pick<Reduction, "facts">): string {
  const parts: string[] = [];
  if (facts.firstEnrolledUs !== null && facts.lastEnrolledUs !== null) {
    parts.push(dateSpan(dayOf(facts.firstEnrolledUs, plan.timezone), dayOf(facts.lastEnrolledUs, plan.timezone)));
  }
  if (plan.followUp !== null) {
    parts.push(`each ${plan.unitCalled.one} followed for ${plural(plan.followUp.days, "day", "days")}`);
  }
  return parts.join(", ");
}

/** What the experiment is, and what it compares; of many variants only how many. */
export function kindText(plan: Plan): string {
  const others = plan.variants.filter(({ isControl }) => !isControl).map(({ name }) => quoted(name));
  const compared = others.length <= MOST_NAMED ? list(others) : `${others.length} variants`;
  return `A randomised experiment: ${compared} against ${quoted(controlOf(plan).name)}.`;
}

const MOST_NAMED = 3;

export function dayOf(us: bigint, timezone: string): Day {
  const milliseconds = Number(us / 1000n - (us % 1000n < 0n ? 1n : 0n));
  const { year, month, day } = Temporal.Instant.fromEpochMilliseconds(milliseconds).toZonedDateTimeISO(timezone);
  return { year, month, day };
}

/** What a metric measures, from the plan: one sentence for the reader who audits. */
export function measureText(metric: Metric, plan: Plan): string {
  const { one, many } = plan.unitCalled;
  const when =
    plan.followUp === null ? "after enrolment" : `in the ${plural(plan.followUp.days, "day", "days")} after enrolment`;
  const better = `${metric.goodIs === "higher" ? "Higher" : "Lower"} is better.`;
  const cap = metric.cap === null ? "" : ` ${capText(metric)}`;
  if (metric.summary === "proportion")
    return `The share of ${many} with at least one ${rowText(metric.of, "row")} ${when}. ${better}`;
  if (metric.summary === "ratio-of-totals" && metric.per !== null) {
    return `All ${many} together: ${amountOf(metric.of)}, divided by ${amountOf(metric.per)}, ${when}.${cap} ${better}`;
  }
  const without =
    metric.withoutRows === "zero" ? `a ${one} without such rows counts as 0` : `a ${one} without such rows is left out`;
  if (metric.quantile !== null) {
    return `The ${percentile(metric.quantile)} over ${many} of ${amountOf(metric.of)} ${when}: ${outOf(metric.quantile)} ${many} have no more; ${without}. ${better}`;
  }
  return `The mean per ${one} of ${amountOf(metric.of)} ${when}; ${without}.${cap} ${better}`;
}

/** "95 of 100", "999 of 1,000", as exact as the plan's text. */
function outOf(share: string): string {
  const [, places = ""] = share.split(".");
  const digits = places.padEnd(2, "0");
  return `at least ${count(Number(digits))} of ${count(10 ** digits.length)}`;
}

function capText({ cap, unitOfMeasure }: Metric): string {
  if (cap === null) return "";
  if (cap.kind === "at")
    return `Values above ${cap.at}${unitOfMeasure === null ? "" : ` ${unitOfMeasure}`} count as that.`;
  return `Values above the ${plain(Number(cap.q) * 100)}% quantile of all groups together count as that.`;
}

function amountOf(part: Part): string {
  const { aggregate } = part;
  switch (aggregate.kind) {
    case "count":
      return `the number of ${rowText(part, "rows")}`;
    case "days":
      return `the number of days with ${rowText(part, "rows")}`;
    case "sum":
      return `the sum of "${aggregate.column}" over ${rowText(part, "rows")}`;
    case "max":
      return `the largest "${aggregate.column}" of ${rowText(part, "rows")}`;
    case "min":
      return `the smallest "${aggregate.column}" of ${rowText(part, "rows")}`;
    case "first":
    case "last":
      return `the ${aggregate.kind} "${aggregate.column}" of ${rowText(part, "rows")}`;
  }
}

/** "booking" rows; rows whose "is_new" and "country" are as the plan says. */
function rowText({ event, where }: Part, noun: "row" | "rows"): string {
  const rows = event === null ? noun : `"${event}" ${noun}`;
  const columns = where.map(({ column }) => `"${column}"`);
  return columns.length === 0
    ? rows
    : `${rows} whose ${list(columns)} ${columns.length === 1 ? "is" : "are"} as the plan asks`;
}
