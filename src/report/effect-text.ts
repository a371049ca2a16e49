import type { Effect, Zone } from "../decision/types.ts";
import type { Amount, Metric, Plan, Role } from "../plan/types.ts";
import {
  alike,
  type Interval,
  percent,
  plain,
  planPercent,
  rates,
  type Scale,
  signedEstimate,
  signedInterval,
} from "../words/index.ts";

/** What a metric is for, in the owner's words (PAGES). */
export const PURPOSE: Readonly<Record<Role, string>> = {
  primary: "decides",
  guardrail: "must not get worse",
  secondary: "for information",
};

/** One effect as cells of a table: every table, the terminal and the summary take their figures from here. */
export interface EffectText {
  /** Control and variant, in digits that tell them apart: "12.0%", "13.2%". */
  readonly levels: readonly [string, string];
  /** What the levels are counted on, where they are not plain: "per 100 visitors"; else "". */
  readonly per: string;
  /** In percent of the control's level; null where the relative difference is not shown. */
  readonly relative: Signed | null;
  /** In the metric's own unit. */
  readonly difference: Signed;
  /** "asked +5%", "limit +5%", "". */
  readonly asked: string;
  /** "above 5%", "within 5%", "not settled", "for information". */
  readonly zone: string;
}
export interface Signed {
  readonly estimate: string;
  readonly interval: string;
}

/** The text of a figure that does not exist. */
export const NONE = "\u2013";

export function effectText(effect: Effect, metric: Metric, plan: Plan): EffectText {
  const { contrast } = effect;
  const { levels, per } = levelsText([contrast.control.mean, contrast.variant.mean], metric, plan);
  const amount = metric.worthwhile ?? metric.margin;
  const mark = amount === null ? [] : [signedAmount(amount, metric)];
  return {
    levels: [levels[0] ?? NONE, levels[1] ?? NONE],
    per,
    relative:
      "absent" in contrast.relative
        ? null
        : signedText(contrast.relative, { kind: "percent" }, amount?.kind === "relative" ? mark : []),
    difference: signedText(contrast.difference, scaleOf(metric), amount?.kind === "absolute" ? mark : []),
    asked:
      amount === null ? "" : `${metric.role === "guardrail" ? "limit" : "asked"} ${signedAmountText(amount, metric)}`,
    zone: zoneText(effect.zone, metric),
  };
}

function signedText(
  {
    estimate,
    low,
    high,
  }: { readonly estimate: number | null; readonly low: number | null; readonly high: number | null },
  scale: Scale,
  marks: readonly number[],
): Signed {
  if (estimate === null) return { estimate: NONE, interval: NONE };
  const interval: Interval = { estimate, low, high };
  return { estimate: signedEstimate(interval, scale, marks), interval: signedInterval(interval, scale, marks) };
}

/** How a metric's differences are written: shares in percentage points, all else in the metric's unit. */
export function scaleOf(metric: Metric): Scale {
  return metric.summary === "proportion" ? { kind: "points" } : { kind: "amount", unit: metric.unitOfMeasure };
}

/** The level of each arm, side by side. A mean below 1 of things counted reads better on 100 units: "8.1 per 100". */
export function levelsText(
  means: readonly (number | null)[],
  metric: Metric,
  plan: Plan,
): { readonly levels: readonly string[]; readonly per: string } {
  const known = means.filter((mean) => mean !== null);
  if (metric.summary === "proportion") {
    const { of, texts } = rates(known);
    return { levels: spread(means, of === "100" ? texts.map((text) => `${text}%`) : known.map(percent)), per: "" };
  }
  if (isCount(metric) && known.every((mean) => mean >= 0 && mean < 1)) {
    const { of, texts } = rates(known);
    return { levels: spread(means, texts), per: `per ${of} ${plan.unitCalled.many}` };
  }
  const unit = metric.unitOfMeasure === null ? "" : ` ${metric.unitOfMeasure}`;
  return {
    levels: spread(
      means,
      alike(known).map((text) => text + unit),
    ),
    per: "",
  };
}

function isCount(metric: Metric): boolean {
  return metric.summary === "mean" && metric.unitOfMeasure === null && metric.of.aggregate.kind === "count";
}

/** Texts of the known figures, put back in their places. */
function spread(means: readonly (number | null)[], texts: readonly string[]): string[] {
  let next = 0;
  return means.map((mean) => (mean === null ? NONE : (texts[next++] ?? NONE)));
}

/** A worthwhile effect or margin with its sign: a gain to reach, or a harm not to pass. */
export function signedAmount(amount: Amount, metric: Metric): number {
  const towardsHigher = (metric.goodIs === "higher") === (metric.role !== "guardrail");
  return towardsHigher ? amount.value : -amount.value;
}

function signedAmountText(amount: Amount, metric: Metric): string {
  return (signedAmount(amount, metric) > 0 ? "+" : "\u2212") + amountText(amount, metric);
}

/** "5%", "0.2 percentage points", "2 kr". */
export function amountText(amount: Amount, metric: Metric): string {
  if (amount.kind === "relative") return planPercent(amount.value);
  if (metric.summary === "proportion") return `${plain(amount.value * 100)} percentage points`;
  return plain(amount.value) + (metric.unitOfMeasure === null ? "" : ` ${metric.unitOfMeasure}`);
}

/** Where the interval lies against the rule, in few words. */
export function zoneText(zone: Zone, metric: Metric): string {
  if (metric.role === "secondary") return PURPOSE.secondary;
  const amount = metric.worthwhile ?? metric.margin;
  const limit = amount === null ? "" : amountText(amount, metric);
  switch (zone) {
    case "worthwhile":
      return `above ${limit}`;
    case "better":
      return limit === "" ? "better" : `better; ${limit} not settled`;
    case "worse":
      return "worse";
    case "too-small":
      return `better, but below ${limit}`;
    case "no-worthwhile-gain":
      return `below ${limit}`;
    case "within":
      return `within ${limit}`;
    case "beyond":
      return `beyond ${limit}`;
    case "not-settled":
      return "not settled";
  }
}
