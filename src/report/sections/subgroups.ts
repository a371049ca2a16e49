import {
  type Effect,
  heterogeneitySentence,
  levelHead,
  measure,
  ofLevel,
  type Subgroup,
  type SubgroupLevel,
} from "../../decision/index.ts";
import type { Plan } from "../../plan/types.ts";
import { isAbsent } from "../../stats/index.ts";
import type { Contrast } from "../../stats/types.ts";
import { count, type Interval, plural, quoted, type Scale } from "../../words/index.ts";
import { type ChoiceMark, choiceAxis, choiceStrip } from "../charts/choices.ts";
import { type Drawing, draw } from "../charts/draw.ts";
import { forestScale } from "../charts/forest.ts";
import { effectText, type Signed } from "../effect-text.ts";
import { axisLabel, figures, scaleText } from "../figure-words.ts";
import { isLong } from "./forest.ts";

/** One effect by the levels of one column: a row a level, drawn where the measure decides, and the numbers in a table. */
export interface SubgroupPart {
  readonly id: string;
  readonly title: string;
  /** Null for a measure for information: its levels stand in the table alone. */
  readonly figure: SubgroupFigure | null;
  readonly sentences: readonly string[];
  readonly columns: readonly string[];
  readonly numbers: readonly { readonly level: string; readonly cells: readonly string[]; readonly stands: string }[];
}
export interface SubgroupFigure {
  /** Printed on more than one sheet, cut between its rows. */
  readonly long: boolean;
  readonly reading: string;
  readonly plotHead: string;
  readonly rows: readonly (Signed & {
    readonly level: string;
    readonly drawing: Drawing | null;
    readonly stands: string;
  })[];
  readonly axis: Drawing | null;
}

/** By metric, one part an effect and column. */
export async function subgroupParts(
  plan: Plan,
  effects: readonly Effect[],
  subgroups: readonly Subgroup[],
  prefix = "subgroup",
): Promise<Map<string, SubgroupPart[]>> {
  const found = new Map<string, SubgroupPart[]>(plan.metrics.map(({ name }) => [name, []]));
  const all = subgroups.reduce((sum, { levels }) => sum + levels.filter((row) => row.pAdjusted !== null).length, 0);
  for (const [i, subgroup] of subgroups.entries()) {
    const effect = effects.find(({ metric, variant }) => metric === subgroup.metric && variant === subgroup.variant);
    if (effect === undefined)
      throw new Error(`a subgroup of ${subgroup.metric} and ${subgroup.variant} without an effect`);
    found.get(subgroup.metric)?.push(await partOf(plan, effect, subgroup, all, `${prefix}-${i + 1}`));
  }
  return found;
}

async function partOf(plan: Plan, effect: Effect, subgroup: Subgroup, all: number, id: string): Promise<SubgroupPart> {
  const several = plan.variants.length > 2;
  return {
    id,
    title: `${effect.metric}${several ? ` with ${quoted(effect.variant)}` : ""}, by ${quoted(subgroup.column)} at enrolment`,
    figure: effect.role === "secondary" ? null : await figureOf(plan, effect, subgroup, id),
    sentences: [
      heterogeneitySentence(subgroup, plan),
      `p is adjusted for all ${count(all)} comparisons within levels, by Benjamini and Hochberg. Subgroups suggest, they do not decide.`,
    ],
    columns: [effect.variant, effect.control, ...NUMBERS.map(([head]) => head)],
    numbers: subgroup.levels.map((row) => ({
      level: levelHead(row.level),
      cells: [
        count(row.units.variant),
        count(row.units.control),
        ...figures(NUMBERS.map(([, pick]) => (isAbsent(row.contrast) ? null : pick(row.contrast, row)))),
      ],
      stands: standsText(row, effect, plan),
    })),
  };
}

const NUMBERS: readonly (readonly [head: string, pick: (own: Contrast, row: SubgroupLevel) => number | null])[] = [
  ["difference", ({ difference }) => difference.estimate],
  ["low", ({ difference }) => difference.low],
  ["high", ({ difference }) => difference.high],
  ["relative", ({ relative }) => ("absent" in relative ? null : relative.estimate)],
  ["low", ({ relative }) => ("absent" in relative ? null : relative.low)],
  ["high", ({ relative }) => ("absent" in relative ? null : relative.high)],
  ["p", ({ difference }) => difference.p],
  ["p, adjusted", (_, row) => row.pAdjusted],
];

async function figureOf(plan: Plan, effect: Effect, { levels }: Subgroup, id: string): Promise<SubgroupFigure> {
  const own = measure(effect, plan);
  const { scale } = own;
  const drawn = levels.map((row) => markOf(row, scale));
  const known = drawn.filter((mark) => mark !== null);
  const axis = choiceAxis(known, null);
  const write = (tick: number) => axisLabel(tick, scale);
  const rows: SubgroupFigure["rows"][number][] = [];
  for (const [i, row] of levels.entries()) {
    const strip = choiceStrip(drawn[i] ?? null, own.interval?.estimate ?? null, null, axis);
    rows.push({
      level: levelHead(row.level),
      drawing: known.length === 0 ? null : await draw(strip, `${id}-${i + 1}`, null),
      ...shownText(row, effect, plan),
      stands: standsText(row, effect, plan),
    });
  }
  const plotHead = scaleText(scale, effect.control);
  return {
    reading:
      "A row for each value on the row that enrolled: filled square, the difference among those with that value; hollow, too few to tell. The difference of the whole runs through all rows as a dotted line. Long upright: no difference.",
    long: isLong(rows.length),
    plotHead,
    rows,
    axis:
      known.length === 0
        ? null
        : await draw(forestScale(axis, write), `${id}-axis`, {
            title: `Axis of the drawing: ${plotHead}`,
            description: `From ${write(axis.low)} to ${write(axis.high)}; the zero line is no difference.`,
          }),
  };
}

function markOf(row: SubgroupLevel, scale: Scale): ChoiceMark | null {
  if (isAbsent(row.contrast)) return null;
  const { relative, difference } = row.contrast;
  const interval: Interval | null =
    scale.kind === "percent"
      ? "absent" in relative
        ? null
        : relative
      : difference.estimate === null
        ? null
        : { estimate: difference.estimate, low: difference.low, high: difference.high };
  if (interval === null || (interval.low === null && interval.high === null)) return null;
  return { interval, isPlanned: row.standing !== "too-few" };
}

function shownText(row: SubgroupLevel, effect: Effect, plan: Plan): Signed {
  if (isAbsent(row.contrast)) return { estimate: "", interval: "" };
  const { estimate, interval } = effectText(ofLevel(effect, row), plan).shown;
  return { estimate, interval: `(${interval})` };
}

/** How a level stands to the whole, a sentence of its own. */
function standsText(row: SubgroupLevel, effect: Effect, plan: Plan): string {
  const { one, many } = plan.unitCalled;
  switch (row.standing) {
    case "too-few":
      return `Too few to tell: ${plural(row.units.variant, one, many)} with ${quoted(effect.variant)}, ${count(row.units.control)} with ${quoted(effect.control)}.`;
    case "against":
      return "Points against the whole.";
    case "not-against":
      return "Does not point against the whole.";
    default:
      return unknown(row.standing);
  }
}

function unknown(standing: never): never {
  throw new Error(`no words for ${String(standing)}`);
}
