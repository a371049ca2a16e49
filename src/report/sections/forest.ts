import {
  absolute,
  covariateInWords,
  deciding,
  type Effect,
  metricOf,
  ruleOf,
  signedRule,
} from "../../decision/index.ts";
import type { Amount, Plan, Role } from "../../plan/types.ts";
import type { Relative } from "../../stats/types.ts";
import { planPercent, quoted, signedPercent } from "../../words/index.ts";
import { type Drawing, draw } from "../charts/draw.ts";
import { type ForestAxis, type ForestRow, forestAxis, forestScale, forestStrip } from "../charts/forest.ts";
import { lineStyle } from "../charts/theme.ts";
import { type EffectText, effectText, PURPOSE, pOrNone, sixDigits } from "../effect-text.ts";
import { controlOf } from "../plan-words.ts";

/** The forest plot as a table: words and figures are text of the page, each row's line is a drawing of its own. */
export interface ForestTable {
  readonly title: string;
  readonly reading: string;
  readonly levelsHead: string;
  readonly plotHead: string;
  readonly groups: readonly ForestGroup[];
  /** The zero line beside a group's heading, and the axis below all rows. */
  readonly zeroLine: Drawing;
  readonly axis: Drawing;
  readonly anyDrawn: boolean;
  /** More rows than a printed page holds beside the sentences: the picture may be cut between rows. */
  readonly long: boolean;
  readonly numberColumns: readonly string[];
  readonly numbers: readonly NumbersRow[];
}
export interface ForestGroup {
  readonly purpose: string;
  readonly measures: readonly ForestMeasure[];
}
export interface ForestMeasure {
  readonly metric: string;
  /** Of several variants each row is a variant, under the measure's name; of one, the row is the measure. */
  readonly several: boolean;
  readonly rows: readonly ForestTableRow[];
}
export interface ForestTableRow {
  readonly variant: string;
  /** "12.0% → 13.2%". */
  readonly levels: string;
  readonly drawing: Drawing | null;
  readonly estimate: string;
  readonly interval: string;
  readonly asked: string;
}
/** The numbers behind a row, with six digits. */
export interface NumbersRow {
  readonly metric: string;
  readonly variant: string;
  readonly cells: readonly string[];
}

const MOST_ROWS_UNCUT = 8;

/** Whether a picture of so many rows is printed on more than one sheet, cut between its rows. */
export function isLong(rows: number): boolean {
  return rows > MOST_ROWS_UNCUT;
}

const GROUPS: readonly Role[] = ["primary", "guardrail", "secondary"];

export async function forestTable(effects: readonly Effect[], plan: Plan): Promise<ForestTable> {
  const ordered = GROUPS.flatMap((role) => effects.filter((effect) => effect.role === role));
  const rows = new Map(ordered.map((effect) => [effect, forestRow(effect, plan)]));
  const drawn = [...rows.values()].filter((row) => row !== null);
  const axis = forestAxis(drawn);
  const others = plan.variants.filter((variant) => !variant.isControl);

  const groups: ForestGroup[] = [];
  for (const role of GROUPS) {
    const own = ordered.filter((effect) => effect.role === role);
    const measures: ForestMeasure[] = [];
    for (const metric of new Set(own.map((effect) => effect.metric))) {
      const tableRows: ForestTableRow[] = [];
      for (const effect of own.filter((candidate) => candidate.metric === metric)) {
        const row = rows.get(effect) ?? null;
        const id = `forest-${ordered.indexOf(effect) + 1}`;
        tableRows.push({
          variant: effect.variant,
          ...rowTexts(effectText(effect, plan)),
          drawing: row === null ? null : await draw(forestStrip(row, axis), id, null),
        });
      }
      measures.push({ metric, several: others.length > 1, rows: tableRows });
    }
    if (measures.length > 0) groups.push({ purpose: PURPOSE[role], measures });
  }
  const control = controlOf(plan).name;
  const several = others.length > 1;
  const variant = several ? "variant" : (others[0]?.name ?? "variant");
  return {
    title: `${several ? "Each variant" : quoted(variant)} against ${quoted(control)}: the difference in percent of the level with ${quoted(control)}`,
    reading: readingText(
      plan,
      effects,
      drawn.some(({ relative }) => reachesFrame(relative, axis)),
    ),
    levelsHead: `${control} \u2192 ${variant}`,
    plotHead: "Difference in percent",
    groups,
    zeroLine: await draw(forestStrip(null, axis), "forest-zero", null),
    axis: await draw(forestScale(axis, percentLabel), "forest-axis", axisText(axis)),
    anyDrawn: drawn.length > 0,
    long: isLong(ordered.length),
    numberColumns: NUMBERS.map(([head]) => head),
    numbers: ordered.map((effect) => ({
      metric: effect.metric,
      variant: effect.variant,
      cells: NUMBERS.map(([, pick, write = sixDigits]) => write(pick(effect))),
    })),
  };
}

function rowTexts(text: EffectText) {
  return {
    levels: `${text.levels.join(" \u2192 ")} ${text.levelsUnit}`.trimEnd(),
    estimate: text.shown.estimate,
    interval: `(${text.shown.interval})`,
    asked: text.mark,
  };
}

/** How the drawing is read, and what of this report is not as a reader would expect it. */
function readingText(plan: Plan, effects: readonly Effect[], beyond: boolean): string {
  const control = quoted(controlOf(plan).name);
  const variants = plan.variants.length - 1;
  const ofAmount = (kind: Amount["kind"]) => effects.some((effect) => ruleOf(metricOf(effect, plan))?.kind === kind);
  return [
    `Thin line: ${planPercent(plan.decision.confidence)} interval. Square: estimate. Long upright: no difference. Short upright: what was asked for, or the limit.`,
    ...(ofAmount("absolute")
      ? [`An amount in a measure\u2019s own unit, and its interval, stand at their share of the level with ${control}.`]
      : []),
    ...(variants > 1
      ? [
          `Intervals of what decides or must not get worse hold for ${variants === 2 ? "both" : `all ${variants}`} variants together.`,
        ]
      : []),
    ...adjustedTexts(plan, effects),
    ...(beyond ? ["A line that reaches the edge goes on beyond it; the figures are whole."] : []),
  ].join(" ");
}

/** "Fare per visitor: levels and difference are adjusted for the same in the 14 days before enrolment." */
function adjustedTexts({ metrics }: Plan, effects: readonly Effect[]): string[] {
  return metrics
    .filter(({ name }) => effects.some((effect) => effect.metric === name && effect.adjusted !== null))
    .map((metric) => `${metric.name}: levels and difference are adjusted for ${covariateInWords(metric)}.`);
}

const NUMBERS: readonly (readonly [
  head: string,
  pick: (effect: Effect) => number | null,
  write?: (figure: number | null) => string,
])[] = [
  ["control", (effect) => deciding(effect).control.mean],
  ["variant", (effect) => deciding(effect).variant.mean],
  ["difference", (effect) => deciding(effect).difference.estimate],
  ["low", (effect) => deciding(effect).difference.low],
  ["high", (effect) => deciding(effect).difference.high],
  ["relative", (effect) => relativeOf(deciding(effect))?.estimate ?? null],
  ["low", (effect) => relativeOf(deciding(effect))?.low ?? null],
  ["high", (effect) => relativeOf(deciding(effect))?.high ?? null],
  ["p", (effect) => deciding(effect).difference.p, pOrNone],
];

function relativeOf({ relative }: Effect["contrast"]): Relative | null {
  return "absent" in relative ? null : relative;
}

/**
 * Null where the relative difference is not shown: the row stands as text. Where the plan's amount is absolute, the
 * interval held against it is drawn, over the control's level, so that line and tick agree with the verdict.
 */
function forestRow(effect: Effect, plan: Plan): ForestRow | null {
  const { relative, control } = deciding(effect);
  if ("absent" in relative || control.mean === null) return null;
  const metric = metricOf(effect, plan);
  const rule = ruleOf(metric);
  const difference = absolute(effect, metric).interval;
  const level = control.mean;
  const over = (end: number | null) => (end === null ? null : end / level);
  const drawn =
    rule?.kind === "absolute" && difference !== null
      ? { estimate: difference.estimate / level, low: over(difference.low), high: over(difference.high) }
      : relative;
  const others = plan.variants.filter((variant) => !variant.isControl);
  return {
    relative: drawn,
    mark: rule === null ? null : signedRule(metric, rule) / (rule.kind === "absolute" ? level : 1),
    decides: effect.role !== "secondary",
    style: lineStyle(
      others.findIndex((variant) => variant.name === effect.variant),
      others.length,
    ),
  };
}

function reachesFrame({ low, high }: Relative, axis: ForestAxis): boolean {
  return low === null || high === null || low < axis.low || high > axis.high;
}

export function percentLabel(tick: number): string {
  return tick === 0 ? "0" : signedPercent(tick).replace(/\.0%$/, "%");
}

function axisText(axis: ForestAxis) {
  return {
    title: "Axis of the drawing: difference from the control in percent of its level",
    description: `From ${signedPercent(axis.low)} to ${signedPercent(axis.high)}; the zero line is no difference.`,
  };
}
