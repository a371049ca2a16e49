import type { Amount, Metric, Plan } from "../plan/types.ts";
import { type Comparative, HIGHER, type Interval, MORE, plain, planPercent, type Scale } from "../words/index.ts";
import { deciding } from "./deciding.ts";
import type { Effect } from "./types.ts";
import { ruleOf } from "./zones.ts";

/** How one effect is shown to a reader: which interval, in which scale and words, and what its digits must keep apart. */
export interface Measure {
  /** Null when not even an estimate exists. */
  readonly interval: Interval | null;
  readonly scale: Scale;
  readonly words: Comparative;
  /** What the plan asks for, with its sign, where this interval is the one held against it. */
  readonly marks: readonly number[];
}

/**
 * The relative interval, as page one shows it; the difference where the plan states its rule as an absolute amount, or
 * where no relative interval exists.
 */
export function measure(effect: Effect, plan: Plan): Measure {
  const metric = metricOf(effect, plan);
  const rule = ruleOf(metric);
  const { relative } = deciding(effect);
  const marks = rule === null ? [] : [signedRule(metric, rule)];
  if (rule?.kind !== "absolute" && !("absent" in relative)) {
    return { interval: relative, scale: { kind: "percent" }, words: comparative(metric, "percent"), marks };
  }
  return { ...absolute(effect, metric), marks: rule?.kind === "absolute" ? marks : [] };
}

/** The difference itself, in points of a proportion or in the metric's unit of measure. */
export function absolute(effect: Effect, metric: Metric): Measure {
  const { estimate, low, high } = deciding(effect).difference;
  const scale = absoluteScale(metric);
  const interval = estimate === null ? null : { estimate, low, high };
  return { interval, scale, words: comparative(metric, scale.kind), marks: [] };
}

export function metricOf(effect: Pick<Effect, "metric">, plan: Plan): Metric {
  const metric = plan.metrics.find(({ name }) => name === effect.metric);
  if (metric === undefined) throw new Error(`an effect on ${effect.metric}, which is no metric of the plan`);
  return metric;
}

/** Whether the metric counts things: then there are more or fewer of them, and else its level is higher or lower. */
export function counts(metric: Metric): boolean {
  const { kind } = metric.of.aggregate;
  return metric.summary === "proportion" || (metric.summary === "mean" && (kind === "count" || kind === "days"));
}

/** "5%", "0.2 percentage points", "7.5 kr": what the plan asks for, in the plan's digits. */
export function amountText(metric: Metric, amount: Amount): string {
  if (amount.kind === "relative") return planPercent(amount.value);
  const scale = absoluteScale(metric);
  if (scale.kind === "points") return pointsText(amount.value);
  return scale.kind === "amount" && scale.unit !== null ? `${plain(amount.value)} ${scale.unit}` : plain(amount.value);
}

/** A share as "0.2 percentage points", "1 percentage point". */
export function pointsText(share: number): string {
  const points = plain(share * 100);
  return `${points} percentage ${points === "1" ? "point" : "points"}`;
}

/** "5% more": a gain to reach, or of a guardrail a harm not to pass. */
export function ruleInWords(metric: Metric, amount: Amount): string {
  const words = comparative(metric, amount.kind === "relative" ? "percent" : absoluteScale(metric).kind);
  return `${amountText(metric, amount)} ${signedRule(metric, amount) > 0 ? words.above : words.below}`;
}

/** The rule in the metric's own direction: a worthwhile effect on the good side of 0, a margin on the bad side. */
export function signedRule(metric: Metric, amount: Amount): number {
  const good = metric.goodIs === "higher" ? 1 : -1;
  return amount.value * (metric.role === "guardrail" ? -good : good);
}

/** Which word says better: "more", "fewer", "higher" or "lower". */
export function goodWord(metric: Metric): string {
  const words = comparative(metric, "percent");
  return metric.goodIs === "higher" ? words.above : words.below;
}

function absoluteScale(metric: Metric): Scale {
  return metric.summary === "proportion" ? { kind: "points" } : { kind: "amount", unit: metric.unitOfMeasure };
}

function comparative(metric: Metric, kind: Scale["kind"]): Comparative {
  return counts(metric) && kind !== "points" ? MORE : HIGHER;
}
