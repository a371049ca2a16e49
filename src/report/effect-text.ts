import {
  absolute,
  amountText,
  deciding,
  type Effect,
  measure,
  metricOf,
  ruleOf,
  signedRule,
  type Zone,
} from "../decision/index.ts";
import type { Metric, Plan, Role } from "../plan/types.ts";
import {
  alike,
  type Interval,
  MINUS,
  pCell,
  percent,
  plain,
  rates,
  type Scale,
  signedEstimate,
  signedInterval,
} from "../words/index.ts";

/** What a metric is for, as the reader's tables group them (PAGES). */
export const PURPOSE: Readonly<Record<Role, string>> = {
  primary: "decides",
  guardrail: "must not get worse",
  secondary: "for information",
};

/** One effect as cells of a table: page, terminal and summary take their figures from here, so that they agree. */
export interface EffectText {
  /** Control and variant, in digits that tell them apart: "12.0%" and "13.2%", "96.40" and "103.90". */
  readonly levels: readonly [string, string];
  /** What follows the levels: "kr", "per 100"; else "". */
  readonly levelsUnit: string;
  /** The interval that is held against the plan: relative, or the difference where the plan's amount is absolute. */
  readonly shown: Signed;
  /** The difference without its unit, for a column that names it: shares in percentage points. */
  readonly bare: Signed;
  /** In percent of the control's level; null where it is not shown. */
  readonly relative: Signed | null;
  /** "asked +5%: reached", "limit +5%: not settled", "better"; "" for a measure for information. */
  readonly mark: string;
}
export interface Signed {
  readonly estimate: string;
  readonly interval: string;
}

/** The text of a figure that does not exist. */
export const NONE = "\u2013";
const NO_INTERVAL: Signed = { estimate: NONE, interval: "no interval" };

export function effectText(effect: Effect, plan: Plan): EffectText {
  const metric = metricOf(effect, plan);
  const { control, variant, relative } = deciding(effect);
  const { levels, unit } = levelsText([control.mean, variant.mean], metric);
  const own = measure(effect, plan);
  const rule = ruleOf(metric);
  const marks = (kind: "relative" | "absolute") => (rule?.kind === kind ? [signedRule(metric, rule)] : []);
  const difference = absolute(effect, metric);
  const bare = difference.interval === null ? NO_INTERVAL : bareText(difference.interval, metric, marks("absolute"));
  return {
    levels: [levels[0] ?? NONE, levels[1] ?? NONE],
    levelsUnit: unit,
    shown: own.scale.kind === "percent" ? signedText(own.interval, own.scale, own.marks) : withUnit(bare, metric),
    bare,
    relative: "absent" in relative ? null : signedText(relative, { kind: "percent" }, marks("relative")),
    mark: markText(effect, plan),
  };
}

function signedText(interval: Interval | null, scale: Scale, marks: readonly number[]): Signed {
  if (interval === null) return NO_INTERVAL;
  return { estimate: signedEstimate(interval, scale, marks), interval: signedInterval(interval, scale, marks) };
}

/** A difference without its unit; shares in percentage points. */
export function bareText({ estimate, low, high }: Interval, metric: Metric, marks: readonly number[]): Signed {
  const factor = metric.summary === "proportion" ? 100 : 1;
  const times = (end: number | null) => (end === null ? null : end * factor);
  return signedText(
    { estimate: estimate * factor, low: times(low), high: times(high) },
    { kind: "amount", unit: null },
    marks.map((mark) => mark * factor),
  );
}

/** The unit once, behind the estimate: "+9.6 kr" and "+5.1 to +14.2". */
function withUnit({ estimate, interval }: Signed, metric: Metric): Signed {
  return estimate === NONE ? NO_INTERVAL : { estimate: `${estimate} ${unitText(metric)}`.trimEnd(), interval };
}

/** The unit of a metric's differences in a narrow cell; "points" are percentage points. */
function unitText(metric: Metric): string {
  return metric.summary === "proportion" ? "points" : (metric.unitOfMeasure ?? "");
}

/** The level of each arm side by side. A mean below 1 of things counted reads better on 100 units: "8.1 per 100". */
export function levelsText(
  means: readonly (number | null)[],
  metric: Metric,
): { readonly levels: readonly string[]; readonly unit: string } {
  const known = means.filter((mean) => mean !== null);
  if (known.length === 0) return { levels: means.map(() => NONE), unit: "" };
  if (metric.summary === "proportion") {
    const { of, texts } = rates(known);
    return { levels: inPlace(means, of === "100" ? texts.map((text) => `${text}%`) : known.map(percent)), unit: "" };
  }
  if (isCount(metric) && known.every((mean) => mean >= 0 && mean < 1)) {
    const { of, texts } = rates(known);
    return { levels: inPlace(means, texts), unit: `per ${of}` };
  }
  return { levels: inPlace(means, alike(known)), unit: metric.unitOfMeasure ?? "" };
}

function isCount(metric: Metric): boolean {
  return metric.summary === "mean" && metric.unitOfMeasure === null && metric.of.aggregate.kind === "count";
}

/** Texts of the figures that exist, put back in their places. */
function inPlace(figures: readonly (number | null)[], texts: readonly string[]): string[] {
  let next = 0;
  return figures.map((figure) => (figure === null ? NONE : (texts[next++] ?? NONE)));
}

/** Figures side by side, all with the same places. */
export function sideBySide(figures: readonly (number | null)[]): string[] {
  const known = figures.filter((figure) => figure !== null);
  return inPlace(figures, known.length === 0 ? [] : alike(known));
}

/** "asked +5%: reached", "limit +5%: not settled": the tick of the forest plot, and how the interval stands to it. */
function markText(effect: Effect, plan: Plan): string {
  if (effect.role === "secondary") return "";
  const metric = metricOf(effect, plan);
  const rule = ruleOf(metric);
  if (rule === null) return STANDS_TO_ZERO[effect.zone] ?? "not settled";
  const sign = signedRule(metric, rule) > 0 ? "+" : MINUS;
  const amount = amountText(metric, rule).replace(/percentage (points?)$/, "$1");
  return `${effect.role === "guardrail" ? "limit" : "asked"} ${sign}${amount}: ${STANDS[effect.zone]}`;
}

const STANDS: Readonly<Record<Zone, string>> = {
  worthwhile: "reached",
  better: "not settled",
  worse: "worse",
  "too-small": "not reached",
  "no-worthwhile-gain": "not reached",
  "not-settled": "not settled",
  within: "within",
  beyond: "beyond",
};
const STANDS_TO_ZERO: { readonly [zone in Zone]?: string } = { better: "better", worse: "worse" };

/** The end of a table's row in words: how the effect stands to what the plan says of it. */
export function verdictText(effect: Effect, plan: Plan): string {
  if (effect.role === "secondary") return PURPOSE.secondary;
  const metric = metricOf(effect, plan);
  const rule = ruleOf(metric);
  if (rule === null) return STANDS_TO_ZERO[effect.zone] ?? "not settled";
  return VERDICTS[effect.zone](amountText(metric, rule));
}

const VERDICTS: Readonly<Record<Zone, (amount: string) => string>> = {
  worthwhile: (amount) => `better by over ${amount}`,
  better: (amount) => `better; ${amount} not settled`,
  worse: () => "worse",
  "too-small": (amount) => `better, but under ${amount}`,
  "no-worthwhile-gain": (amount) => `not better by ${amount}`,
  "not-settled": () => "not settled",
  within: (amount) => `within ${amount}`,
  beyond: (amount) => `beyond ${amount}`,
};

/** A figure in a table of the numbers behind a picture; a p is told as everywhere else. */
export function sixDigits(figure: number | null): string {
  return figure === null ? NONE : plain(Number(figure.toPrecision(6)));
}
export function pOrNone(p: number | null): string {
  return p === null ? NONE : pCell(p);
}
