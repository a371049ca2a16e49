import { type Arm, arms } from "../cells/index.ts";
import type { MetricCells, Reduction } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { balance as meansOf } from "../stats/index.ts";
import { quoted } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { byPAtMostCaution } from "./limits.ts";
import type { Check, Figure } from "./types.ts";
import { ofDifference } from "./words.ts";

type Ratio = Extract<Arm, { kind: "ratio" }>;

/**
 * Does the denominator of a ratio, per unit, differ between the arms? Then the ratio can move without its numerator, and is no
 * longer about the same units. One part a ratio, by its variant that differs most; the contrasts of both parts stand in the
 * figures, so that no estimate is told where none may be.
 */
export function denominator(plan: Plan, reduction: Reduction): Check | null {
  const findings = plan.metrics.flatMap((metric, m) => {
    const cells = reduction.metrics[m];
    return metric.summary === "ratio-of-totals" && cells !== undefined ? judge(plan, metric, cells) : [];
  });
  return asCheck("denominator", findings, {});
}

interface Compared {
  readonly variant: string;
  readonly p: number;
  readonly per: Figure;
  readonly of: Figure;
}

function judge(plan: Plan, metric: Metric, cells: MetricCells): Finding[] {
  const compared = comparisons(plan, metric, cells).sort((a, b) => a.p - b.p);
  const [worst] = compared;
  if (worst === undefined) return [];
  const figures = { variant: worst.variant, p: worst.p, denominator: worst.per, numerator: worst.of };
  const name = compared.length > 1 ? `${metric.name}, ${quoted(worst.variant)} against the control` : metric.name;
  const sentence = `${name}: what it is divided by (${divisor(metric)} per ${plan.unitCalled.one}) was compared between the groups. ${ofDifference(worst.p)}`;
  if (byPAtMostCaution(worst.p) === "pass") return [passed(metric.name, sentence, figures)];
  return [
    {
      about: metric.name,
      result: "caution",
      strong: false,
      sentence,
      remedy: `Read ${metric.name} together with its two parts, each compared alone (the figures of this check, section 3): the ratio can move because of what it is divided by. Add both parts as metrics (summary: mean) in the plan of a next test.`,
      figures,
    },
  ];
}

function divisor({ per }: Metric): string {
  if (per === null) return "rows";
  const rows = per.event === null ? "rows" : `rows of ${quoted(per.event)}`;
  return "column" in per.aggregate
    ? `${quoted(per.aggregate.column)} of ${rows}`
    : per.aggregate.kind === "days"
      ? `days with ${rows}`
      : rows;
}

/** Every variant against the control, where both parts have a mean. */
function comparisons(plan: Plan, metric: Metric, cells: MetricCells): Compared[] {
  const ratios = arms(metric, cells, plan.variants.length).filter((arm): arm is Ratio => arm.kind === "ratio");
  const control = ratios[plan.variants.findIndex(({ isControl }) => isControl)];
  const alpha = 1 - plan.decision.confidence;
  return plan.variants.flatMap(({ name, isControl }, v) => {
    const variant = ratios[v];
    if (isControl || control === undefined || variant === undefined) return [];
    const per = meansOf(control.denominator, variant.denominator, alpha);
    const of = meansOf(control.numerator, variant.numerator, alpha);
    return per.p === null ? [] : [{ variant: name, p: per.p, per: figuresOf(per), of: figuresOf(of) }];
  });
}

function figuresOf({ control, variant, difference, p }: ReturnType<typeof meansOf>): Figure {
  const all = {
    meanOfControl: control.mean,
    meanOfVariant: variant.mean,
    difference: difference.estimate,
    low: difference.low,
    high: difference.high,
    p,
  };
  return Object.fromEntries(Object.entries(all).filter(([, figure]) => figure !== null));
}
