import { type ChoiceRow, type Choices, deciding, type Effect, measure, metricOf } from "../../decision/index.ts";
import type { Metric, Plan } from "../../plan/types.ts";
import type { Relative } from "../../stats/types.ts";
import { capital, type Interval, pText, quoted, type Scale } from "../../words/index.ts";
import { type ChoiceMark, choiceAxis, choiceStrip } from "../charts/choices.ts";
import { type Drawing, draw } from "../charts/draw.ts";
import { forestScale } from "../charts/forest.ts";
import { choiceText, unchanged } from "../choice-words.ts";
import { drawnEffects } from "../drawn.ts";
import { effectText, pOrNone, type Signed, sixDigits, verdictText } from "../effect-text.ts";
import { axisLabel, scaleText } from "../figure-words.ts";
import { controlOf } from "../plan-words.ts";

/** One contrast under other reasonable choices: words and figures as text, each row's line a drawing of its own. */
export interface ChoicesFigure {
  readonly id: string;
  readonly title: string;
  readonly reading: string;
  readonly plotHead: string;
  readonly rows: readonly ChoiceTableRow[];
  readonly axis: Drawing | null;
  readonly sentences: readonly string[];
  readonly numberColumns: readonly string[];
  readonly numbers: readonly { readonly choice: string; readonly cells: readonly string[] }[];
}
export interface ChoiceTableRow {
  readonly choice: string;
  readonly isPlanned: boolean;
  readonly drawing: Drawing | null;
  readonly estimate: string;
  readonly interval: string;
  readonly stands: string;
}

/** One figure an effect that has other choices, under its metric. */
export async function choiceFigures(
  plan: Plan,
  effects: readonly Effect[],
  choices: readonly Choices[],
): Promise<Map<string, ChoicesFigure[]>> {
  const found = new Map<string, ChoicesFigure[]>(plan.metrics.map(({ name }) => [name, []]));
  const drawn = drawnEffects(effects);
  for (const [i, { metric, variant, rows }] of choices.entries()) {
    const effect = effects.find((one) => one.metric === metric && one.variant === variant);
    if (effect === undefined) throw new Error(`choices for ${metric} and ${variant}, of which there is no effect`);
    if (rows.length > 1)
      found.get(metric)?.push(await figure(plan, effect, rows, `choices-${i + 1}`, drawn.has(effect)));
  }
  return found;
}

async function figure(
  plan: Plan,
  effect: Effect,
  rows: readonly ChoiceRow[],
  id: string,
  isDrawn: boolean,
): Promise<ChoicesFigure> {
  const metric = metricOf(effect, plan);
  const { scale, marks } = measure(effect, plan);
  const [mark = null] = marks;
  const drawn = rows.map((row) => markOf(row, scale));
  const known = isDrawn ? drawn.filter((one) => one !== null) : [];
  const axis = choiceAxis(known, mark);
  const planned = known.find(({ isPlanned }) => isPlanned)?.interval.estimate ?? null;
  const tableRows: ChoiceTableRow[] = [];
  for (const [i, row] of rows.entries()) {
    const one = drawn[i] ?? null;
    tableRows.push({
      choice: capital(choiceText(row.choice, metric, plan)),
      isPlanned: row.choice === "as-planned",
      drawing: known.length === 0 ? null : await draw(choiceStrip(one, planned, mark, axis), `${id}-${i + 1}`, null),
      ...figuresOf(row, effect, plan),
      stands: standsText(row, effect, plan),
    });
  }
  const several = plan.variants.length > 2;
  const write = (tick: number) => axisLabel(tick, scale);
  return {
    id,
    title: `${effect.metric}${several ? ` with ${quoted(effect.variant)}` : ""}, under other reasonable choices`,
    reading: known.length === 0 ? ONE_AT_A_TIME : readingText(mark !== null),
    plotHead: scaleText(scale, controlOf(plan).name),
    rows: tableRows,
    axis:
      known.length === 0
        ? null
        : await draw(forestScale(axis, write), `${id}-axis`, {
            title: `Axis of the drawing: ${scaleText(scale, controlOf(plan).name)}`,
            description: `From ${write(axis.low)} to ${write(axis.high)}; the zero line is no difference.`,
          }),
    sentences: sentences(rows, metric, plan),
    numberColumns: NUMBERS.map(([head]) => head),
    numbers: rows.map((row) => ({
      choice: choiceText(row.choice, metric, plan),
      cells: [
        ...NUMBERS.map(([, pick, write = sixDigits]) => write(pick(row))).slice(0, -1),
        row.agrees ? "yes" : "no",
      ],
    })),
  };
}

/** On the scale that is held against the plan; null where a choice has no interval there. */
function markOf(row: ChoiceRow, scale: Scale): ChoiceMark | null {
  const isPlanned = row.choice === "as-planned";
  const interval = scale.kind === "percent" ? relativeOf(row) : differenceOf(row);
  if (interval === null || (interval.low === null && interval.high === null)) return null;
  return { interval, isPlanned };
}

function relativeOf({ relative }: ChoiceRow): Relative | null {
  return relative === null || "absent" in relative ? null : relative;
}

function differenceOf({ difference: { estimate, low, high } }: ChoiceRow): Interval | null {
  return estimate === null ? null : { estimate, low, high };
}

function figuresOf(row: ChoiceRow, effect: Effect, plan: Plan): Signed {
  if (row.relative === null) {
    const { p } = row.difference;
    const which = row.sign === 1 ? "higher" : row.sign === -1 ? "lower" : "no difference";
    return { estimate: p === null ? which : `${which}, ${pText(p)}`, interval: "" };
  }
  const { estimate, interval } = effectText(under(effect, row), plan).shown;
  return { estimate, interval: `(${interval})` };
}

/** The effect as if the plan had made this choice. */
function under(effect: Effect, { difference, relative, zone }: ChoiceRow): Effect {
  const own = deciding(effect);
  return {
    ...effect,
    adjusted: null,
    zone: zone ?? effect.zone,
    contrast: { ...own, difference: { ...own.difference, ...difference }, relative: relative ?? own.relative },
  };
}

/** "same", or where else a choice puts the contrast. */
function standsText(row: ChoiceRow, effect: Effect, plan: Plan): string {
  const text =
    row.zone === null || effect.role === "secondary" ? sideText(row.side) : verdictText(under(effect, row), plan);
  if (row.choice === "as-planned") return text;
  return row.agrees ? "the same" : `differs: ${text}`;
}

function sideText(side: ChoiceRow["side"]): string {
  return side === 0 ? "not told apart" : side > 0 ? "higher" : "lower";
}

function sentences(rows: readonly ChoiceRow[], metric: Metric, plan: Plan): string[] {
  const others = rows.filter(({ choice }) => choice !== "as-planned");
  const elsewhere = others.filter(({ agrees }) => !agrees).map(({ choice }) => choiceText(choice, metric, plan));
  const n = others.length;
  const told =
    elsewhere.length === 0
      ? n === 1
        ? "The one other choice puts it where the plan\u2019s own does."
        : `All ${n} other choices put it where the plan\u2019s own does.`
      : `${elsewhere.length} of ${n} other choices ${elsewhere.length === 1 ? "puts" : "put"} it elsewhere: ${elsewhere.join("; ")}.`;
  const same = unchanged(
    metric,
    plan,
    rows.map(({ choice }) => choice),
  ).map((choice) => choiceText(choice, metric, plan));
  return [
    told,
    "The choices share the data: this counts fragility, not evidence.",
    ...(same.length === 0 ? [] : [`Not listed, since nothing would change or nothing be left: ${same.join("; ")}.`]),
  ];
}

const ONE_AT_A_TIME = "One choice is changed at a time, all else is as planned.";

function readingText(hasMark: boolean): string {
  return [
    ONE_AT_A_TIME,
    "Filled square: the plan\u2019s own choice; its estimate runs through all rows as a dotted line. Hollow square: another choice. Long upright: no difference.",
    ...(hasMark ? ["Short upright: what was asked for, or the limit."] : []),
  ].join(" ");
}

const NUMBERS: readonly (readonly [
  head: string,
  pick: (row: ChoiceRow) => number | null,
  write?: (figure: number | null) => string,
])[] = [
  ["difference", ({ difference }) => difference.estimate],
  ["low", ({ difference }) => difference.low],
  ["high", ({ difference }) => difference.high],
  ["relative", (row) => relativeOf(row)?.estimate ?? null],
  ["low", (row) => relativeOf(row)?.low ?? null],
  ["high", (row) => relativeOf(row)?.high ?? null],
  ["p", ({ difference }) => difference.p, pOrNone],
  ["the same", () => null],
];
