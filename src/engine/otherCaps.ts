import { rankOf } from "./caps.ts";
import { type Engine, nano } from "./engine.ts";
import {
  alike,
  alikeInY,
  cellsOfGroups,
  type Group,
  groupsOfCells,
  groupsOfPairs,
  pairsOfGroups,
  together,
  without,
} from "./groups.ts";
import { armsOfCells, armsOfPairs, type MeasuredMetric, ownScales, type Scales, widened } from "./measuredMetric.ts";
import { nanoOf, nanoText } from "./nano.ts";
import type { PowerClass } from "./pivot.ts";
import { aboveCaps, type Dialect, extremes, valueFromTop } from "./sql/index.ts";
import { decimalTables, jointTables, measured } from "./tables.ts";
import type { ChoiceCells, OtherCells } from "./types.ts";

const OTHER_QUANTILES = [
  ["cap-0.99", "0.99"],
  ["cap-0.999", "0.999"],
] as const;

/** A cap that the plan does not set, in 10^-9; null: none. */
interface OtherCap {
  readonly choice: OtherCells;
  readonly cap: bigint | null;
}

/**
 * A metric under other caps: none, and the two usual quantiles. Asked for are the sums of the units only that lie above
 * one of the caps; the others are the same under each.
 */
export async function capChoices(one: MeasuredMetric, engine: Engine, dialect: Dialect): Promise<ChoiceCells[]> {
  const { summary } = one.metric;
  const most = one.of.largest.reduce<bigint | null>((max, end) => (max === null || end > max ? end : max), null);
  if (most === null || (summary !== "mean" && summary !== "ratio-of-totals")) return [];
  const own = one.cap === null ? null : nanoOf(one.cap);
  const largest = own === null ? most : await largestBeforeCap(one, engine);
  const caps = await otherCaps(one, own, largest, engine, dialect);
  if (caps.length === 0) return [];
  const ladder = [...new Set([own, ...caps.map(({ cap }) => cap)].filter((cap) => cap !== null))].sort(ascending);
  const above = await sumsAbove(one, ladder, largest, engine, dialect);
  return caps.map(({ choice, cap }) => under(one, above, ladder, own, choice, cap));
}

/** Those that change a value which the plan's own cap leaves, or leave one that it changes; of two alike the first. */
async function otherCaps(
  one: MeasuredMetric,
  own: bigint | null,
  largest: bigint,
  engine: Engine,
  dialect: Dialect,
): Promise<OtherCap[]> {
  const n = one.y.classes.reduce((sum, group) => sum + group.n, 0n);
  const found: OtherCap[] = [{ choice: "no-cap", cap: null }];
  for (const [choice, q] of OTHER_QUANTILES) {
    const cap = await fromTheTop(one, n - rankOf(q, n), engine, dialect);
    // Where so few units have more than 0 nothing would be left to compare.
    if (cap !== null) found.push({ choice, cap });
  }
  const effect = (cap: bigint | null) => (cap === null || cap >= largest ? null : cap);
  const effects = [effect(own), ...found.map(({ cap }) => effect(cap))];
  return found.filter((_, i) => effects.indexOf(effects[i + 1] ?? null) === i + 1);
}

/** The value that `above` others exceed or equal; null where it is not above 0. */
async function fromTheTop(
  { plain, y }: MeasuredMetric,
  above: bigint,
  engine: Engine,
  dialect: Dialect,
): Promise<bigint | null> {
  const [row] = await engine.query(valueFromTop(plain, nanoText(lowestNeeded(y.classes, above)), above, dialect));
  const found = row === undefined ? 0n : nano(row, "x");
  return found > 0n ? found : null;
}

/** A value from which on upwards there are more than `above` units: few are sorted then. The cap moves none below it. */
function lowestNeeded(classes: readonly PowerClass[], above: bigint): bigint {
  const positive = classes.filter(({ powerOfTwo, least }) => powerOfTwo !== null && least > 0n);
  if (positive.length < classes.filter(({ powerOfTwo }) => powerOfTwo !== null).length) return 0n;
  const fromTop = positive.sort((a, b) => (a.least > b.least ? -1 : 1));
  let n = 0n;
  for (const { n: own, least } of fromTop) {
    n += own;
    if (n > above) return least;
  }
  return 0n;
}

async function largestBeforeCap({ plain }: MeasuredMetric, engine: Engine): Promise<bigint> {
  const [ends = {}] = await engine.query(extremes([plain]));
  return nano(ends, "most0");
}

/** Sums of the units above the lowest cap; the bucket is how many of the caps a unit lies above. */
interface SumsAbove {
  readonly scales: Scales;
  readonly values: readonly Group[];
  readonly pairs: readonly Group[];
}

async function sumsAbove(
  one: MeasuredMetric,
  ladder: readonly bigint[],
  largest: bigint,
  engine: Engine,
  dialect: Dialect,
): Promise<SumsAbove> {
  const { plain, y, paired } = one;
  const scales = { ...ownScales(one), y: widened(y.scale, y.pivot, [largest, largest]) };
  const over = aboveCaps(plain, ladder.map(nanoText), dialect);
  const measuredY = measured(plain, y.pivot, scales.y, [], dialect);
  const [ofY, ofX] = await decimalTables(paired === null ? [measuredY] : [measuredY, paired.x], engine, over);
  if (ofY === undefined) throw new Error("no sums above a cap");
  if (paired === null || ofX === undefined) return { scales, values: groupsOfCells(ofY), pairs: [] };
  const [joint] = await jointTables([{ y: measuredY, x: paired.x, ofY, ofX }], engine, over);
  return { scales, values: groupsOfCells(ofY), pairs: joint === undefined ? [] : groupsOfPairs(joint) };
}

/** The metric's cells as if its cap were another. */
function under(
  one: MeasuredMetric,
  above: SumsAbove,
  ladder: readonly bigint[],
  own: bigint | null,
  choice: OtherCells,
  cap: bigint | null,
): ChoiceCells {
  const { y, paired } = one;
  const { scales } = above;
  const exceeds = (limit: bigint | null) => (limit === null ? ladder.length + 1 : ladder.indexOf(limit) + 1);
  const held = (limit: bigint | null, scale: number) => (group: Group) =>
    limit === null ? group : alike(group.variant, group.n, limit, nanoOf(y.pivot), scale);
  const heldPairs = (limit: bigint | null, scale: number) => (group: Group) =>
    limit === null ? group : alikeInY(group, limit, nanoOf(y.pivot), scale);
  return {
    choice,
    of: cellsOfGroups(
      y.pivot,
      scales.y,
      recapped(armsOfCells(one, scales), above.values, {
        own: [exceeds(own), held(own, scales.y)],
        other: [exceeds(cap), held(cap, scales.y)],
      }),
    ),
    joint:
      paired === null
        ? null
        : pairsOfGroups(
            [y.pivot, paired.x.pivot],
            [scales.y, scales.x],
            recapped(armsOfPairs(one, scales), above.pairs, {
              own: [exceeds(own), heldPairs(own, scales.y)],
              other: [exceeds(cap), heldPairs(cap, scales.y)],
            }),
          ),
  };
}

/** From which bucket on units are held down, and their sums when they are. */
type Held = readonly [from: number, sums: (group: Group) => Group];

/** Takes the units above the lowest cap out as the plan holds them, and puts them back as the other cap does. */
function recapped(
  arms: readonly Group[],
  above: readonly Group[],
  { own, other }: { readonly own: Held; readonly other: Held },
): Group[] {
  return arms.flatMap((arm) => {
    const groups = above.filter(({ variant }) => variant === arm.variant);
    const as = ([from, sums]: Held) => groups.map((group) => (group.bucket >= from ? sums(group) : group));
    return together([without(arm, together(as(own))), ...as(other)]) ?? [];
  });
}

const ascending = (a: bigint, b: bigint) => (a < b ? -1 : a > b ? 1 : 0);
