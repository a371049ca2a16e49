import type { Effect } from "../../decision/types.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Metric, Plan } from "../../plan/types.ts";
import type { ArmFigures, Contrast, Method } from "../../stats/types.ts";
import { alike, capital, count, type Interval, number, plural, pText, signedInterval } from "../../words/index.ts";
import { amountText, effectText, levelsText, NONE, PURPOSE, type Signed, scaleOf, zoneText } from "../effect-text.ts";
import { measureText } from "../plan-words.ts";

/** Section 5: one part a metric, with its arms and its effects. */
export interface MetricSection {
  readonly id: string;
  readonly name: string;
  readonly purpose: string;
  readonly measure: string;
  readonly rule: string;
  readonly notes: readonly string[];
  readonly armColumns: readonly string[];
  readonly arms: readonly ArmText[];
  readonly effects: readonly EffectRow[];
  readonly adjusted: boolean;
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
  readonly method: string;
  readonly zone: string;
  readonly beside: readonly string[];
}

export const METHOD: Readonly<Record<Method, string>> = {
  normal: "normal",
  welch: "Welch\u2019s t",
  score: "score",
};

export function metricSections(plan: Plan, reduction: Reduction, effects: readonly Effect[]): MetricSection[] {
  return plan.metrics.map((metric, i) => {
    const own = effects.filter((effect) => effect.metric === metric.name);
    return {
      id: `metric-${i + 1}`,
      name: metric.name,
      purpose: PURPOSE[metric.role],
      measure: measureText(metric, plan),
      rule: ruleText(metric),
      notes: notes(metric, plan, reduction, own),
      armColumns: armColumns(metric, plan),
      arms: armRows(metric, plan, own),
      effects: own.map((effect) => effectRow(effect, metric, plan)),
      adjusted: metric.role !== "secondary" && own.length > 1,
    };
  });
}

function ruleText(metric: Metric): string {
  if (metric.role === "secondary")
    return "It informs and does not decide; its intervals are not widened for the number of measures looked at.";
  const amount = metric.worthwhile ?? metric.margin;
  if (amount === null) return "The plan asks for any gain.";
  const size = amountText(amount, metric);
  if (metric.role === "primary")
    return `The plan asks for at least ${size} ${metric.goodIs === "higher" ? "more" : "less"}.`;
  return `The plan tolerates at most ${size} ${metric.goodIs === "higher" ? "less" : "more"}.`;
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
    const changed = plan.variants.map(({ name }, v) => `${count(cells.cap?.units[v] ?? 0)} with ${name}`).join(", ");
    notes.push(
      `The cap stands at ${number(Number(cells.cap.value))}${unit}; it changed ${plural(total(cells.cap.units), one, many)}: ${changed}.`,
    );
  }
  if (total(cells.leftOut) > 0) {
    const by = plan.variants.map(({ name }, v) => `${count(cells.leftOut[v] ?? 0)} with ${name}`).join(", ");
    notes.push(`${capital(plural(total(cells.leftOut), one, many))} without a value left out: ${by}.`);
  }
  if (cells.countedWithoutNumber > 0) {
    notes.push(
      `${plural(cells.countedWithoutNumber, "counted row", "counted rows")} held no number and added nothing.`,
    );
  }
  for (const effect of effects) {
    const absent = absentText(effect, plan);
    if (absent !== null && !notes.includes(absent)) notes.push(absent);
  }
  return notes;
}

/** Why a figure does not exist, as a sentence. */
function absentText({ contrast, control }: Effect, plan: Plan): string | null {
  const reason = contrast.why ?? ("absent" in contrast.relative ? contrast.relative : null);
  const { one, many } = plan.unitCalled;
  switch (reason?.absent) {
    case undefined:
      return null;
    case "no-units":
      return `There is no interval: a group has no ${one} with a value.`;
    case "few-units":
      return `There is no interval: a group has fewer than two ${many} with a value.`;
    case "zero-variance":
      return "There is no interval: no value differs from another in either group.";
    case "control-near-zero":
      return `Relative: not shown. The level with ${control} is not clearly above 0, so a share of it says nothing.`;
    case "zero-denominator":
      return "There is no ratio: a denominator adds up to 0.";
    case "lost-digits":
      return "There is no interval: the values are so alike for their size that no digits are left to tell them apart.";
    case "not-built":
      return "This version does not compute this figure.";
  }
}

function armColumns(metric: Metric, plan: Plan): string[] {
  const unit = metric.unitOfMeasure === null ? "" : `, ${metric.unitOfMeasure}`;
  const many = capital(plan.unitCalled.many);
  if (metric.summary === "proportion") return [many, "With", "Share"];
  if (metric.summary === "ratio-of-totals") return [many, `Total${unit}`, "Ratio", "Standard deviation of the score"];
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
      plan,
    );
    return arms.map(({ name }, i) => ({
      variant: name,
      cells: [units[i], totals[i], levels[i]].map((cell) => cell ?? NONE),
    }));
  }
  const means = column((arm) => arm.mean);
  const sds = column((arm) => arm.sd);
  const ends = metric.summary === "mean" ? [column((arm) => arm.smallest), column((arm) => arm.largest)] : [];
  return arms.map(({ name }, i) => ({
    variant: name,
    cells: [units, totals, means, sds, ...ends].map((texts) => texts[i] ?? NONE),
  }));
}

function sideBySide(figures: readonly (number | null)[]): string[] {
  const texts = alike(figures.filter((figure) => figure !== null));
  let next = 0;
  return figures.map((figure) => (figure === null ? NONE : (texts[next++] ?? NONE)));
}

function effectRow(effect: Effect, metric: Metric, plan: Plan): EffectRow {
  const { contrast } = effect;
  const text = effectText(effect, metric, plan);
  return {
    variant: effect.variant,
    difference: text.difference,
    relative: text.relative ?? { estimate: "not shown", interval: "" },
    p: contrast.difference.p === null ? NONE : pText(contrast.difference.p).replace(/^p = /, ""),
    pAdjusted: effect.pAdjusted === null ? NONE : pText(effect.pAdjusted).replace(/^p = /, ""),
    method: METHOD[contrast.difference.method],
    zone: metric.role === "secondary" ? PURPOSE.secondary : zoneText(effect.zone, metric),
    beside: besideTexts(contrast, metric),
  };
}

function besideTexts({ beside, difference }: Contrast, metric: Metric): string[] {
  return beside.map(({ method, low, high }) => {
    const interval: Interval = { estimate: difference.estimate ?? (low + high) / 2, low, high };
    return `${METHOD[method]}: ${signedInterval(interval, scaleOf(metric))}`;
  });
}
