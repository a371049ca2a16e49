import type { Metric, Plan } from "../plan/types.ts";
import { alike, percentile, quoted, rates } from "../words/index.ts";
import { deciding } from "./deciding.ts";
import { counts, measure, metricOf } from "./measure.ts";
import type { Effect } from "./types.ts";

/**
 * '13.2 of 100 visitors with "calendar" and 12.0 with "list"', 'the 95th percentile was 3.12 s with "calendar" and 3.05 s
 * with "list"'; null when an arm has no figure.
 */
export function levelsInWords(effect: Effect, plan: Plan): string | null {
  const { control, variant } = deciding(effect);
  if (control.mean === null || variant.mean === null) return null;
  const metric = metricOf(effect, plan);
  // beside a difference per unit stand levels per unit
  const asRates =
    metric.summary === "proportion" || (perHundred(metric) && measure(effect, plan).scale.kind === "percent");
  const { first, second } = written(metric, plan, variant.mean, control.mean, asRates);
  return `${first} with ${quoted(effect.variant)} and ${second} with ${quoted(effect.control)}`;
}

function written(
  metric: Metric,
  plan: Plan,
  variant: number,
  control: number,
  asRates: boolean,
): { first: string; second: string } {
  const many = metric.withoutRows === "leave-out" ? `${plan.unitCalled.many} with a value` : plan.unitCalled.many;
  const one = metric.withoutRows === "leave-out" ? `${plan.unitCalled.one} with a value` : plan.unitCalled.one;
  if (asRates && Math.max(variant, control) <= 1) {
    const { of, texts } = rates([variant, control]);
    const [first = "", second = ""] = texts;
    return { first: `${first} ${metric.summary === "proportion" ? "of" : "per"} ${of} ${many}`, second };
  }
  const [first = "", second = ""] = alike([variant, control]);
  const unit = metric.unitOfMeasure === null ? "" : ` ${metric.unitOfMeasure}`;
  if (metric.quantile !== null) {
    const of = metric.withoutRows === "leave-out" ? `of ${many} ` : "";
    return { first: `${of}the ${percentile(metric.quantile)} was ${first}${unit}`, second: second + unit };
  }
  if (counts(metric)) return { first: `${first}${unit} per ${one}`, second: second + unit };
  return { first: first + unit, second: second + unit };
}

/** Rare things are counted on 100 units: "8.1 per 100 visitors"; not where the plan gives them a unit of measure. */
function perHundred(metric: Metric): boolean {
  return counts(metric) && metric.of.aggregate.kind === "count" && metric.unitOfMeasure === null;
}
