import { rankOf } from "./caps.ts";
import { count, type Engine, nano } from "./engine.ts";
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
import { aboveCaps, type Dialect, extremes, valuesFromTop } from "./sql/index.ts";
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

/** A metric of which other caps are asked, its own in 10^-9, and its largest value before that. */
interface Capped {
  readonly one: MeasuredMetric;
  readonly own: bigint | null;
  readonly largest: bigint;
}

/**
 * Metrics under other caps, one list a metric: none, and the two usual quantiles. Asked for are the sums of the units only
 * that lie above one of the caps; the others are the same under each. Each question is asked of all metrics at once.
 */
export async function capChoices(
  metrics: readonly MeasuredMetric[],
  engine: Engine,
  dialect: Dialect,
): Promise<ChoiceCells[][]> {
  const summed = await withLargest(metrics, engine);
  const caps = await otherCaps(summed, engine, dialect);
  const asked = summed.flatMap((capped, i) => {
    const own = caps[i] ?? [];
    if (own.length === 0) return [];
    const limits = [capped.own, ...own.map(({ cap }) => cap)].filter((cap) => cap !== null);
    return [{ ...capped, caps: own, ladder: [...new Set(limits)].sort(ascending) }];
  });
  const above = await sumsAbove(asked, engine, dialect);
  return metrics.map((metric) => {
    const i = asked.findIndex(({ one }) => one === metric);
    const [found, sums] = [asked[i], above[i]];
    if (found === undefined || sums === undefined) return [];
    return found.caps.map(({ choice, cap }) => under(metric, sums, found.ladder, found.own, choice, cap));
  });
}

/** The means and ratios with some value. */
async function withLargest(metrics: readonly MeasuredMetric[], engine: Engine): Promise<Capped[]> {
  const summed = metrics.flatMap((one) => {
    const { summary } = one.metric;
    const most = one.of.largest.reduce<bigint | null>((max, end) => (max === null || end > max ? end : max), null);
    if (most === null || (summary !== "mean" && summary !== "ratio-of-totals")) return [];
    return [{ one, own: one.cap === null ? null : nanoOf(one.cap), largest: most }];
  });
  const held = summed.filter(({ own }) => own !== null);
  if (held.length === 0) return summed;
  const [ends = {}] = await engine.query(extremes(held.map(({ one }) => one.plain)));
  return summed.map((capped) => {
    const i = held.indexOf(capped);
    return i < 0 ? capped : { ...capped, largest: nano(ends, `most${i}`) };
  });
}

/** Those that change a value which the plan's own cap leaves, or leave one that it changes; of two alike the first. */
async function otherCaps(summed: readonly Capped[], engine: Engine, dialect: Dialect): Promise<OtherCap[][]> {
  const asked = summed.flatMap(({ one }, i) => {
    const n = one.y.classes.reduce((sum, group) => sum + group.n, 0n);
    return OTHER_QUANTILES.map(([choice, q]) => {
      const above = n - rankOf(q, n);
      return { i, choice, x: one.plain, above, bound: nanoText(lowestNeeded(one.y.classes, above)) };
    });
  });
  const rows = asked.length === 0 ? [] : await engine.query(valuesFromTop(asked, dialect));
  const values = new Map(rows.map((row) => [count(row, "place"), nano(row, "x")]));
  return summed.map(({ own, largest }, i) => {
    const found: OtherCap[] = [{ choice: "no-cap", cap: null }];
    for (const [place, one] of asked.entries()) {
      const cap = values.get(place) ?? 0n;
      // Where so few units have more than 0 nothing would be left to compare.
      if (one.i === i && cap > 0n) found.push({ choice: one.choice, cap });
    }
    const effect = (cap: bigint | null) => (cap === null || cap >= largest ? null : cap);
    const effects = [effect(own), ...found.map(({ cap }) => effect(cap))];
    return found.filter((_, c) => effects.indexOf(effects[c + 1] ?? null) === c + 1);
  });
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

/** Sums of the units above the lowest cap; the bucket is how many of the caps a unit lies above. */
interface SumsAbove {
  readonly scales: Scales;
  readonly values: readonly Group[];
  readonly pairs: readonly Group[];
}

async function sumsAbove(
  asked: readonly (Capped & { readonly ladder: readonly bigint[] })[],
  engine: Engine,
  dialect: Dialect,
): Promise<SumsAbove[]> {
  const all = asked.map(({ one, ladder, largest }) => {
    const { plain, y } = one;
    const scales = { ...ownScales(one), y: widened(y.scale, y.pivot, [largest, largest]) };
    const over = aboveCaps(plain, ladder.map(nanoText), dialect);
    return { over, scales, y: measured(plain, y.pivot, scales.y, [], dialect), x: one.paired?.x ?? null };
  });
  const partners = all.flatMap(({ over, x }, i) => (x === null ? [] : [{ i, over, measure: x }]));
  const tables = await decimalTables([...all.map(({ y, over }) => ({ measure: y, over })), ...partners], engine);
  const pairs = partners.flatMap(({ i, over, measure: x }, p) => {
    const [y, ofY, ofX] = [all[i]?.y, tables[i], tables[all.length + p]];
    return y === undefined || ofY === undefined || ofX === undefined ? [] : [{ y, x, over, ofY, ofX }];
  });
  const joints = await jointTables(pairs, engine, dialect);
  return all.map(({ scales }, i) => {
    const [of, joint] = [tables[i], joints[partners.findIndex((partner) => partner.i === i)]];
    if (of === undefined) throw new Error(`no sums above the caps of metric ${i}`);
    return { scales, values: groupsOfCells(of), pairs: joint === undefined ? [] : groupsOfPairs(joint) };
  });
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
