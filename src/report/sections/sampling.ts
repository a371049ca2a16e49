import { tailsInWords } from "../../checks/index.ts";
import {
  absolute,
  analysedUnits,
  deciding,
  type Effect,
  metricOf,
  otherIntervalSentence,
} from "../../decision/index.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import {
  type BootstrapT,
  drawsReach,
  isNotDrawn,
  type NotDrawn,
  normalUpperTail,
  type Resampled,
} from "../../stats/index.ts";
import {
  atLeast,
  count,
  fixed,
  type Interval,
  intervalInWords,
  list,
  percent,
  pText,
  quoted,
} from "../../words/index.ts";
import { type Drawing, draw } from "../charts/draw.ts";
import { type SamplingRow, sampling } from "../charts/sampling.ts";
import { drawnEffects } from "../drawn.ts";

/** How near the normal curve one contrast is: the drawn distribution, and what is to be said of the interval. */
export interface SamplingPart {
  readonly id: string;
  readonly title: string;
  /** What the tails and the other interval say; then what stands behind it. */
  readonly sentences: readonly string[];
  readonly notes: readonly string[];
  readonly figure: SamplingFigure | null;
}
export interface SamplingFigure {
  readonly caption: string;
  readonly reading: string;
  readonly drawing: Drawing;
  readonly columns: readonly string[];
  readonly rows: readonly { readonly bin: string; readonly cells: readonly string[] }[];
}

/**
 * By metric, one part an effect that has any of it.
 * @param isDecided false on an undecidable report, where no conclusion can stay or change
 */
export async function samplingParts(
  plan: Plan,
  effects: readonly Effect[],
  reduction: Reduction,
  isDecided: boolean,
): Promise<Map<string, SamplingPart[]>> {
  const found = new Map<string, SamplingPart[]>(plan.metrics.map(({ name }) => [name, []]));
  const units = analysedUnits(reduction);
  const drawn = drawnEffects(effects);
  for (const [i, effect] of effects.entries()) {
    if (effect.normality === null && effect.resampled === null) continue;
    const id = `sampling-${i + 1}`;
    found.get(effect.metric)?.push({
      id,
      title: `${quoted(effect.variant)} against ${quoted(effect.control)}: how near the normal curve`,
      sentences: sentences(effect, plan, isDecided ? effects : null),
      notes: [...drawnNotes(effect, plan), ...unitNotes(effect, plan, units)],
      figure: drawn.has(effect) ? await figure(effect, plan, id) : null,
    });
  }
  return found;
}

function sentences(effect: Effect, plan: Plan, effects: readonly Effect[] | null): string[] {
  const { normality } = effect;
  if (normality === null) return [];
  const { level, shapesDiffer } = normality.tails;
  const judged = {
    near: ", near enough",
    caution: ", off by more than a fifth",
    strong: ", off by more than half",
  }[level];
  return [
    `By the moments of the groups\u2019 own values ${tailsInWords(normality.tails)}${judged}.`,
    ...(shapesDiffer ? ["The groups\u2019 values are of different shapes, which makes that less sure."] : []),
    ...(deciding(effect).difference.method === "score"
      ? ["The score interval, which counts, does not lean on it."]
      : []),
    ...[otherIntervalSentence(effect, plan, effects)].filter((sentence) => sentence !== null),
  ];
}

/** What drawing and dealing says, or why nothing was drawn. */
function drawnNotes(effect: Effect, plan: Plan): string[] {
  if (effect.resampled === null) return [];
  const { bootstrap, randomisation } = effect.resampled;
  if (isNotDrawn(bootstrap)) return [notDrawnText(bootstrap, plan)];
  const critical = effect.normality?.critical;
  if (critical !== undefined && !drawsReach(2 * normalUpperTail(critical), bootstrap.draws)) {
    return [
      `No interval is taken from the ${count(bootstrap.draws)} draws: this look\u2019s boundary lies farther out than they reach.`,
    ];
  }
  const metric = metricOf(effect, plan);
  const { scale, words } = absolute(effect, metric);
  const estimate = deciding(effect).difference.estimate ?? (bootstrap.low + bootstrap.high) / 2;
  const interval: Interval = { estimate, low: bootstrap.low, high: bootstrap.high };
  const left = bootstrap.undefinedDraws === 0 ? "" : `, ${count(bootstrap.undefinedDraws)} of which had no figure`;
  return [
    `Bootstrap-t interval, from ${count(bootstrap.draws)} draws of the groups\u2019 own values${left}: ${intervalInWords(interval, scale, words)}.`,
    isNotDrawn(randomisation)
      ? notDrawnText(randomisation, plan)
      : `Randomisation test, ${count(randomisation.deals)} deals: ${pText(randomisation.p)}.`,
  ];
}

function notDrawnText({ notDrawn }: NotDrawn, { unitCalled: { many } }: Plan): string {
  switch (notDrawn) {
    case "few-units":
      return `Nothing was drawn from the groups\u2019 values: one has fewer than 20 ${many}.`;
    case "few-events":
      return `Nothing was drawn from the groups\u2019 values: in one fewer than 10 ${many} are with the event, or without it.`;
    case "no-spread":
      return "Nothing was drawn from the groups\u2019 values: what was drawn does not vary.";
    case "undefined-draws":
      return "What was drawn from the groups\u2019 values is not shown: over 1% of the draws had no figure.";
    case "no-buckets":
      return `Nothing was drawn from the groups\u2019 values: for this confidence the log is needed, since some of the sums that were kept would stand for fewer than 10 ${many}.`;
    default:
      return unknown(notDrawn);
  }
}

function unknown(reason: never): never {
  throw new Error(`no words for ${String(reason)}`);
}

/** From how many units on the curve is near, and how much one unit weighs. */
function unitNotes({ normality }: Effect, { unitCalled: { one, many } }: Plan, units: number): string[] {
  if (normality === null) return [];
  const { unitsForTails, unitsByRule, largest } = normality;
  const fifth = "both tails are within a fifth of the nominal one";
  const enough =
    unitsForTails === null
      ? `From how many ${many} on ${fifth} cannot be told from these data.`
      : `From about ${atLeast(unitsForTails)} ${many} in all on, at least, ${fifth}; here there were ${count(units)}.`;
  const rules = `Rules of thumb ask for ${count(unitsByRule.kohavi)} or ${count(unitsByRule.cochran)} in each group (355 and 25 times the squared skewness) and do not know that groups of one size cancel.`;
  const shares = [largest?.control, largest?.variant].flatMap((share) => (share == null ? [] : [share.ofSquares]));
  const single =
    shares.length === 0 ? [] : [`No ${one} holds more than ${percent(Math.max(...shares))} of a group\u2019s spread.`];
  return [`${enough} ${rules}`, ...single];
}

/** Beyond it the limits of an early look would stand at the drawing's edge, or past it. */
const FARTHEST_DRAWN = 4.6;

async function figure(effect: Effect, plan: Plan, id: string): Promise<SamplingFigure | null> {
  const shown = drawnRows(effect.resampled);
  const critical = effect.normality?.critical;
  if (critical === undefined || critical > FARTHEST_DRAWN || shown.length === 0) return null;
  const { many } = plan.unitCalled;
  const limit = fixed(critical, 2);
  const bootstrap = effect.resampled?.bootstrap;
  const draws = bootstrap === undefined || isNotDrawn(bootstrap) ? 0 : bootstrap.draws;
  const tail = normalUpperTail(critical);
  const caption = `${effect.metric}, ${quoted(effect.variant)} against ${quoted(effect.control)}: ${count(draws)} draws against the normal curve`;
  const rows = shown.map(
    ({ share, histogram, tails }): SamplingRow => ({
      label: SIZES[share]?.label ?? "",
      histogram,
      below: `${percent(tails.lowerTail)} below`,
      above: `${percent(tails.upperTail)} above`,
    }),
  );
  const told = shown.map(
    ({ share, tails }) =>
      `${SIZES[share]?.words ?? ""} of the ${many} ${percent(tails.lowerTail)} below and ${percent(tails.upperTail)} above`,
  );
  return {
    caption,
    reading: `Stepped: the difference over its standard error, drawn anew from the groups\u2019 own values. Dashed: the normal curve. Filled: beyond \u2212${limit} and ${limit}, where the interval lies wholly below or wholly above the truth, by the normal curve ${percent(tail)} each; of ${count(draws)} draws, chance alone can move that by ${chanceOf(tail, draws)} points.`,
    drawing: await draw(
      sampling(rows, critical, (value) => fixed(value, Number.isInteger(value) ? 0 : 2)),
      `${id}-drawing`,
      { title: caption, description: `Beyond ${limit} on either side lie, with ${list(told)}.` },
    ),
    columns: ["from", "to", ...shown.map(({ share }) => `${SIZES[share]?.words ?? ""} of the ${many}`), "normal curve"],
    rows: binRows(shown, draws),
  };
}

/** Two standard deviations of a share of draws, in points. */
function chanceOf(share: number, draws: number): string {
  return fixed(200 * Math.sqrt((share * (1 - share)) / draws), 1);
}

const SIZES: { readonly [share: number]: { readonly label: string; readonly words: string } } = {
  0.0625: { label: "at 1/16 of the size", words: "1/16" },
  0.25: { label: "at 1/4 of the size", words: "1/4" },
  1: { label: "at full size", words: "all" },
};

type Drawn = BootstrapT["drawn"][number];
type Shown = { [Key in keyof Drawn]: NonNullable<Drawn[Key]> };

function drawnRows(resampled: Resampled | null): Shown[] {
  if (resampled === null || isNotDrawn(resampled.bootstrap)) return [];
  return resampled.bootstrap.drawn.flatMap(({ share, histogram, tails }) =>
    histogram === null || tails === null ? [] : [{ share, histogram, tails }],
  );
}

/** Each bin with its draws, and how many the normal curve would have there; without the empty ones at both ends. */
function binRows(shown: readonly Shown[], draws: number): SamplingFigure["rows"] {
  const [first] = shown;
  if (first === undefined) return [];
  const { from, width, counts } = first.histogram;
  const edges = counts.map((_, bin) => [from + bin * width, from + (bin + 1) * width] as const);
  const end = from + counts.length * width;
  const all = [
    { low: Number.NEGATIVE_INFINITY, high: from, drawn: shown.map(({ histogram }) => histogram.below) },
    ...edges.map(([low, high], bin) => ({
      low,
      high,
      drawn: shown.map(({ histogram }) => histogram.counts[bin] ?? 0),
    })),
    { low: end, high: Number.POSITIVE_INFINITY, drawn: shown.map(({ histogram }) => histogram.above) },
  ];
  const isFull = ({ drawn }: (typeof all)[number]) => drawn.some((n) => n > 0);
  return all.slice(all.findIndex(isFull), all.findLastIndex(isFull) + 1).map(({ low, high, drawn }) => ({
    bin: Number.isFinite(low) ? fixed(low, 2) : "under",
    cells: [
      Number.isFinite(high) ? fixed(high, 2) : "and over",
      ...drawn.map(count),
      fixed(draws * (normalUpperTail(low) - normalUpperTail(high)), 1),
    ],
  }));
}
