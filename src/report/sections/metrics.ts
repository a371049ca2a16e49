import { anyIsEnough, because, deciding, type Effect, ruleInWords, ruleOf } from "../../decision/index.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Metric, Plan, Role, Summary } from "../../plan/types.ts";
import type { ArmFigures, Method } from "../../stats/types.ts";
import { capital, count, type Interval, list, percentile, plain, plural, quoted } from "../../words/index.ts";
import {
  bareText,
  effectText,
  levelsText,
  NONE,
  PURPOSE,
  pOrNone,
  type Signed,
  sideBySide,
  verdictText,
} from "../effect-text.ts";
import { measureText } from "../plan-words.ts";
import { adjustedNotes, unadjusted } from "./adjusted.ts";

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
export interface ArmText {
  readonly variant: string;
  readonly cells: readonly string[];
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

export const METHOD: Readonly<Record<Method, string>> = {
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
      notes: notes(metric, plan, reduction, own),
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

/** What the reader must know to take the figures as they are meant. */
function notes(metric: Metric, plan: Plan, reduction: Reduction, effects: readonly Effect[]): string[] {
  const cells = reduction.metrics.find((candidate) => candidate.metric === metric.name);
  if (cells === undefined) throw new Error(`the reduction has no cells of the metric "${metric.name}"`);
  const { one, many } = plan.unitCalled;
  const total = (counts: readonly number[]) => counts.reduce((a, b) => a + b, 0);
  const notes: string[] = [];
  if (cells.cap !== null) {
    const unit = metric.unitOfMeasure === null ? "" : ` ${metric.unitOfMeasure}`;
    const changed = plan.variants
      .map(({ name }, v) => `${count(cells.cap?.units[v] ?? 0)} with ${quoted(name)}`)
      .join(", ");
    notes.push(
      `The cap stands at ${plain(Number(cells.cap.value))}${unit}; it changed ${plural(total(cells.cap.units), one, many)}: ${changed}.`,
    );
  }
  if (total(cells.leftOut) > 0) {
    const by = plan.variants.map(({ name }, v) => `${count(cells.leftOut[v] ?? 0)} with ${quoted(name)}`).join(", ");
    notes.push(`${capital(plural(total(cells.leftOut), one, many))} without a value left out: ${by}.`);
  }
  if (cells.countedWithoutNumber > 0) {
    notes.push(
      `${plural(cells.countedWithoutNumber, "counted row", "counted rows")} held no number and added nothing.`,
    );
  }
  notes.push(...adjustedNotes(metric, plan, effects));
  for (const effect of effects) {
    const absent = absentText(effect, plan);
    if (absent !== null && !notes.includes(absent)) notes.push(absent);
  }
  return notes;
}

/** Why a figure does not exist, as a sentence. */
function absentText(effect: Effect, plan: Plan): string | null {
  const contrast = deciding(effect);
  const { control } = effect;
  const { one, many } = plan.unitCalled;
  const { low, high } = contrast.difference;
  if (contrast.why !== null) return `There is no interval, since ${because(contrast.why.absent, one, many)}.`;
  if (contrast.difference.method === "quantile" && (low === null || high === null)) {
    return `One end of the interval is open, since ${because("few-for-rank", one, many)}.`;
  }
  if (!("absent" in contrast.relative)) return null;
  return `The difference relative to ${quoted(control)} is not shown, since ${because(contrast.relative.absent, one, many)}.`;
}

function armColumns(metric: Metric, plan: Plan): string[] {
  const unit = metric.unitOfMeasure === null ? "" : `, ${metric.unitOfMeasure}`;
  const many = capital(plan.unitCalled.many);
  if (metric.summary === "proportion") return [many, "With", "Share"];
  if (metric.summary === "ratio-of-totals") return [many, `Total${unit}`, "Ratio", "Standard deviation of the score"];
  if (metric.quantile !== null) {
    return [many, `${capital(percentile(metric.quantile))}${unit}`, `Smallest${unit}`, `Largest${unit}`];
  }
  return [many, `Total${unit}`, `Mean${unit}`, `Standard deviation${unit}`, `Smallest${unit}`, `Largest${unit}`];
}

function armRows(metric: Metric, plan: Plan, effects: readonly Effect[]): ArmText[] {
  const arms = plan.variants.flatMap(({ name, isControl }): { name: string; arm: ArmFigures }[] => {
    if (isControl) return effects[0] === undefined ? [] : [{ name, arm: effects[0].contrast.control }];
    const own = effects.find((effect) => effect.variant === name);
    return own === undefined ? [] : [{ name, arm: own.contrast.variant }];
  });
  const column = (pick: (arm: ArmFigures) => number | null) => sideBySide(arms.map(({ arm }) => pick(arm)));
  const units = arms.map(({ arm }) => count(arm.units));
  const totals = column((arm) => arm.total);
  if (metric.summary === "proportion") {
    const { levels } = levelsText(
      arms.map(({ arm }) => arm.mean),
      metric,
    );
    return arms.map(({ name }, i) => ({
      variant: name,
      cells: [units[i], totals[i], levels[i]].map((cell) => cell ?? NONE),
    }));
  }
  const means = column((arm) => arm.mean);
  const sds = column((arm) => arm.sd);
  const ends = [column((arm) => arm.smallest), column((arm) => arm.largest)];
  const columns = {
    mean: [units, totals, means, sds, ...ends],
    "ratio-of-totals": [units, totals, means, sds],
    quantile: [units, means, ...ends],
  }[metric.summary];
  return arms.map(({ name }, i) => ({ variant: name, cells: columns.map((texts) => texts[i] ?? NONE) }));
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
