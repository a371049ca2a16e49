import { anyIsEnough, deciding, type Effect, ruleInWords, ruleOf } from "../../decision/index.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Metric, Plan, Role, Summary } from "../../plan/types.ts";
import type { Method } from "../../stats/types.ts";
import { type Interval, list } from "../../words/index.ts";
import { bareText, effectText, PURPOSE, pOrNone, type Signed, verdictText } from "../effect-text.ts";
import { measureText } from "../plan-words.ts";
import { unadjusted } from "./adjusted.ts";
import { type ArmText, armColumns, armRows } from "./metric-arms.ts";
import { metricNotes } from "./metric-notes.ts";

/** Section 5: one part a metric, with its arms and its effects. */
export interface MetricSection {
  readonly id: string;
  readonly name: string;
  readonly purpose: string;
  /** Lines of Methods that the heads of its tables link to. */
  readonly purposeTerm: string;
  readonly differenceTerm: string;
  readonly familyTerm: string;
  readonly measure: string;
  readonly rule: string;
  readonly notes: readonly string[];
  /** Of the differences: "percentage points", "kr", "". */
  readonly unit: string;
  readonly armColumns: readonly string[];
  readonly arms: readonly ArmText[];
  readonly effects: readonly EffectRow[];
  /** For what p is adjusted, as the head of its column; null where it is not. */
  readonly adjustedFor: string | null;
}
export interface EffectRow {
  readonly variant: string;
  readonly difference: Signed;
  readonly relative: Signed;
  readonly p: string;
  readonly pAdjusted: string;
  /** "Holm 0.0012"; "" where nothing stands beside. */
  readonly pBeside: string;
  readonly method: string;
  /** The line of Methods that explains it. */
  readonly term: string;
  readonly verdict: string;
  readonly beside: readonly string[];
}

const METHOD: Readonly<Record<Method, string>> = {
  normal: "normal",
  welch: "Welch\u2019s t",
  score: "score",
  "skew-corrected": "skew-corrected",
  quantile: "order statistics",
};

/** The line of Methods on each. */
const TERM: Readonly<Record<Method, string>> = {
  normal: "method-difference",
  welch: "method-small-groups",
  score: "method-shares",
  "skew-corrected": "method-corrected-interval",
  quantile: "method-quantiles",
};

export function metricSections(plan: Plan, reduction: Reduction, effects: readonly Effect[]): MetricSection[] {
  return plan.metrics.map((metric, i) => {
    const own = effects.filter((effect) => effect.metric === metric.name);
    return {
      id: `metric-${i + 1}`,
      name: metric.name,
      purpose: PURPOSE[metric.role],
      purposeTerm: PURPOSE_TERM[metric.role],
      differenceTerm: DIFFERENCE_TERM[metric.summary],
      familyTerm: familyTerm(metric, plan),
      measure: measureText(metric, plan),
      rule: ruleText(metric),
      notes: metricNotes(metric, plan, reduction, own),
      unit: metric.summary === "proportion" ? "percentage points" : (metric.unitOfMeasure ?? ""),
      armColumns: armColumns(metric, plan),
      arms: armRows(metric, plan, own),
      effects: own.flatMap((effect) => effectRows(effect, metric, plan)),
      adjustedFor: adjustedFor(metric, plan, effects),
    };
  });
}

const PURPOSE_TERM: Readonly<Record<Role, string>> = {
  primary: "method-several-deciding-measures",
  guardrail: "method-what-must-not-get-worse",
  secondary: "method-measures-for-information",
};
const DIFFERENCE_TERM: Readonly<Record<Summary, string>> = {
  mean: "method-difference",
  proportion: "method-shares",
  "ratio-of-totals": "method-ratio-of-totals",
  quantile: "method-quantiles",
};

function familyTerm({ role }: Metric, plan: Plan): string {
  if (role === "secondary") return "method-measures-for-information";
  if (plan.looks !== null) return "method-planned-looks";
  return plan.variants.length > 2 ? "method-several-variants" : "method-several-deciding-measures";
}

/** The family that a metric's p are adjusted for, where it holds more than one test. */
function adjustedFor(metric: Metric, plan: Plan, effects: readonly Effect[]): string | null {
  const variants = plan.variants.length - 1;
  if (metric.role === "secondary") {
    const tests = effects.filter(
      (effect) => effect.role === "secondary" && deciding(effect).difference.p !== null,
    ).length;
    return tests > 1 ? `${tests} tests for information` : null;
  }
  const overPrimaries = metric.role === "primary" && anyIsEnough(plan);
  const over = [
    ...(plan.looks === null ? [] : [`${plan.looks.planned.length} looks`]),
    ...(variants > 1 ? [overPrimaries ? "the variants" : `${variants} variants`] : []),
    ...(overPrimaries ? [variants > 1 ? "deciding measures" : "the deciding measures"] : []),
  ];
  return over.length === 0 ? null : list(over);
}

function ruleText(metric: Metric): string {
  if (metric.role === "secondary")
    return "It informs and does not decide; its intervals are not widened for the number of measures looked at.";
  const rule = ruleOf(metric);
  if (rule === null) return "The plan asks for any proven gain.";
  const words = ruleInWords(metric, rule);
  return metric.role === "primary" ? `The plan asks for at least ${words}.` : `The plan tolerates at most ${words}.`;
}

/** One row an effect; where it is adjusted that one decides, and the unadjusted stands under it. */
function effectRows(effect: Effect, metric: Metric, plan: Plan): EffectRow[] {
  const own = effectRow(effect, metric, plan);
  const plain = unadjusted(effect);
  if (plain === null) return [own];
  return [
    { ...own, variant: `${own.variant}, adjusted` },
    { ...effectRow(plain, metric, plan), variant: `${own.variant}, not adjusted`, verdict: "shown beside" },
  ];
}

function effectRow(effect: Effect, metric: Metric, plan: Plan): EffectRow {
  const { difference, relative } = deciding(effect);
  const text = effectText(effect, plan);
  return {
    variant: effect.variant,
    difference: text.bare,
    relative: "absent" in relative ? { estimate: "not shown", interval: "" } : (text.relative ?? text.bare),
    p: pOrNone(difference.p),
    pAdjusted: pOrNone(effect.pAdjusted),
    pBeside: effect.pHolm === null ? "" : `Holm ${pOrNone(effect.pHolm)}`,
    method: METHOD[difference.method],
    term: TERM[difference.method],
    verdict: verdictText(effect, plan),
    beside: besideTexts(effect, metric),
  };
}

function besideTexts(effect: Effect, metric: Metric): string[] {
  const { beside, difference } = deciding(effect);
  return beside.map(({ method, low, high }) => {
    const interval: Interval = { estimate: difference.estimate ?? (low + high) / 2, low, high };
    return `${METHOD[method]}, ${bareText(interval, metric, []).interval}`;
  });
}
