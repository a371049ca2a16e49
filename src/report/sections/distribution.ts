import { type Bin, beyond, type Shape, shape } from "../../cells/index.ts";
import type { Effect } from "../../decision/index.ts";
import type { Reduction, SizeTable } from "../../engine/types.ts";
import type { Metric, Plan } from "../../plan/types.ts";
import { count, list, number, percent, plain, plural } from "../../words/index.ts";
import { type DrawnShape, distributionStrip, sizeAxis, tails } from "../charts/distribution.ts";
import { type Drawing, draw } from "../charts/draw.ts";
import { type SizeAxis, sizeScale } from "../charts/size-axis.ts";
import { lineStyle, theme } from "../charts/theme.ts";
import { drawnEffects } from "../drawn.ts";
import { controlOf } from "../plan-words.ts";

/** How the values of each arm lie: what is at 0, the bulk, and the tail. */
export interface DistributionFigure {
  readonly id: string;
  readonly caption: string;
  readonly reading: string;
  readonly arms: readonly { readonly variant: string; readonly note: string; readonly drawing: Drawing }[];
  readonly axis: Drawing;
  readonly tailsHead: string;
  readonly tails: Drawing;
  readonly columns: readonly string[];
  readonly rows: readonly { readonly size: string; readonly cells: readonly string[] }[];
}

interface Arm extends DrawnShape {
  readonly variant: string;
  readonly isControl: boolean;
}

/** By metric; none for a share, whose two values the table of the arms tells, and none where all values are 0. */
export async function distributionFigures(
  plan: Plan,
  reduction: Reduction,
  effects: readonly Effect[],
): Promise<ReadonlyMap<string, DistributionFigure>> {
  const found = new Map<string, DistributionFigure>();
  const drawn = new Set([...drawnEffects(effects)].map((effect) => effect.metric));
  for (const [m, metric] of plan.metrics.entries()) {
    const sizes = reduction.metrics.find((cells) => cells.metric === metric.name)?.sizes ?? null;
    if (sizes === null || (effects.length > 0 && !drawn.has(metric.name))) continue;
    const arms = armsOf(plan, sizes, isWhole(metric));
    if (arms.every((arm) => arm.shape.bins.length === 0)) continue;
    found.set(metric.name, await figure(metric, plan, arms, `shape-${m + 1}`));
  }
  return found;
}

/** Counts and days are whole numbers; a cap between two of them moves no unit over an edge that matters. */
function isWhole({ of }: Metric): boolean {
  return of.aggregate.kind === "count" || of.aggregate.kind === "days";
}

function armsOf({ variants }: Plan, sizes: SizeTable, whole: boolean): Arm[] {
  const others = variants.filter(({ isControl }) => !isControl);
  return variants.map(({ name, isControl }, v) => ({
    variant: name,
    isControl,
    shape: shape(sizes, v, whole),
    dash: isControl
      ? theme.dotted
      : lineStyle(
          others.findIndex((other) => other.name === name),
          others.length,
        ).dash,
  }));
}

async function figure(metric: Metric, plan: Plan, arms: readonly Arm[], id: string): Promise<DistributionFigure> {
  const { many } = plan.unitCalled;
  const axis = sizeAxis(
    arms.map((arm) => arm.shape),
    isWhole(metric),
  );
  const control = arms.find(({ isControl }) => isControl) ?? null;
  const caption = captionOf(metric, plan);
  const unit = metric.unitOfMeasure === null ? "" : `, ${metric.unitOfMeasure}`;
  const drawn: DistributionFigure["arms"][number][] = [];
  for (const [v, arm] of arms.entries()) {
    const text = {
      title: `${metric.name} with ${arm.variant}`,
      description: described(arm.shape, plan),
    };
    const strip = distributionStrip(arm, arm.isControl ? null : control, axis);
    drawn.push({
      variant: arm.variant,
      note: noteOf(arm.shape, plan),
      drawing: await draw(strip, `${id}-${v + 1}`, text),
    });
  }
  return {
    id,
    caption,
    reading: readingOf(plan, axis, arms),
    arms: drawn,
    axis: await draw(sizeScale(axis, plain), `${id}-axis`, null),
    tailsHead: `Of all ${many}, how many have that much or more${axis.below ? ", or are as far below 0" : ""}${unit}`,
    tails: await draw(tails(arms, axis, plain), `${id}-tails`, {
      title: `${caption}: how many have that much or more`,
      description: tailsDescribed(arms),
    }),
    columns: arms.map(({ variant }) => variant),
    rows: rowsOf(arms),
  };
}

function captionOf(metric: Metric, plan: Plan): string {
  const { one, many } = plan.unitCalled;
  const unit = metric.unitOfMeasure === null ? "" : `, ${metric.unitOfMeasure}`;
  const which = metric.summary === "ratio-of-totals" ? ` (what is divided, per ${one})` : "";
  return `${metric.name}${which}: ${many} by size of their value${unit}`;
}

function readingOf(plan: Plan, axis: SizeAxis, arms: readonly Arm[]): string {
  const { many } = plan.unitCalled;
  const zero = arms.some((arm) => arm.shape.zero > 0)
    ? ` Upright over 0: the share of ${many} at 0, the full height being all.`
    : "";
  return `Outline: how many ${many} have a value of that size, on a scale by ratios${axis.isWhole ? "" : " (each doubling has one width)"}.${zero} Dotted: ${controlOf(plan).name}. In the second picture each line of the scale is a tenth of the one above it.`;
}

function noteOf({ units, zero }: Shape, { unitCalled: { one, many } }: Plan): string {
  const all = plural(units, one, many);
  if (units === 0 || zero === 0) return `${all}, none at 0`;
  return zero === units ? `${all}, all at 0` : `${all}, ${percent(zero / units)} at 0`;
}

/** What the outline shows, in the edges of its bins: both halves of each sentence are true of the values themselves. */
function described(own: Shape, plan: Plan): string {
  const sentences = [`${noteOf(own, plan)}.`];
  const rest = own.units - own.zero;
  const middle = middleBin(own.bins, rest);
  if (middle !== null)
    sentences.push(`Of those not at 0 the middle one lies between ${number(middle.from)} and ${number(middle.to)}.`);
  const first = own.bins[0];
  const last = own.bins[own.bins.length - 1];
  if (first !== undefined && last !== undefined) {
    sentences.push(`They reach from ${number(first.from)} to ${number(last.to)}.`);
  }
  return sentences.join(" ");
}

function middleBin(bins: readonly Bin[], units: number): Bin | null {
  let passed = 0;
  for (const bin of bins) {
    passed += bin.units;
    if (2 * passed >= units) return bin;
  }
  return null;
}

function tailsDescribed(arms: readonly Arm[]): string {
  const told = arms.flatMap(({ variant, shape: own }) => {
    const edge = own.bins.findLast(({ from }) => from > 0 && beyond(own, from) * 100 >= own.units)?.from;
    return edge === undefined
      ? []
      : [`with ${variant} ${percent(beyond(own, edge) / own.units)} have ${number(edge)} or more`];
  });
  return told.length === 0 ? "Fewer than 1 in 100 have more than 0." : `Far out, ${list(told)}.`;
}

/** Every size that some arm has, with its units; 0 in its place. */
function rowsOf(arms: readonly Arm[]): DistributionFigure["rows"] {
  const bins = new Map(arms.flatMap((arm) => arm.shape.bins.map(({ from, to }) => [from, to] as const)));
  const row = ([from, to]: readonly [number, number]) => ({
    size: `${number(from)} to ${number(to)}`,
    cells: arms.map((arm) => count(arm.shape.bins.find((bin) => bin.from === from)?.units ?? 0)),
  });
  const sorted = [...bins].sort(([a], [b]) => a - b);
  return [
    ...sorted.filter(([from]) => from < 0).map(row),
    ...(arms.some((arm) => arm.shape.zero > 0) ? [{ size: "0", cells: arms.map((arm) => count(arm.shape.zero)) }] : []),
    ...sorted.filter(([from]) => from > 0).map(row),
  ];
}
