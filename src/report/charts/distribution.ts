import type { TopLevelSpec } from "vega-lite";
import { type Bin, beyond, type Shape } from "../../cells/index.ts";
import { inPixels, type Letters, letters, line, type Point, type Stroke, strokes } from "./pixels.ts";
import { theme } from "./theme.ts";

/** One arm, and the dashes that its lines have wherever they are drawn. */
export interface DrawnShape {
  readonly shape: Shape;
  readonly dash: readonly number[];
}

/** The axis that all arms share: by ratios on either side of 0, which has a column of its own between them. */
export interface SizeAxis {
  /** log2 of the sizes at which a side begins and ends. */
  readonly least: number;
  readonly most: number;
  readonly below: boolean;
  readonly above: boolean;
  /** The highest outline, as a share of units a doubling. */
  readonly highest: number;
  readonly isWhole: boolean;
}

const WIDTH = 340;
/** Zero's column, in which the lower picture has its scale. */
const GAP = 72;
const ROW = 64;
const FULL = 0.74;
const BAR = 9;
const FOOT = 22;
const TAIL = 130;
const HEAD = 8;
/** Sizes under a millionth of the largest stand at the beginning of the axis. */
const MOST_DOUBLINGS = 20;
const LETTER = 7;

export function sizeAxis(shapes: readonly Shape[], isWhole: boolean): SizeAxis {
  const bins = shapes.flatMap(({ bins }) => bins);
  const ends = bins.flatMap(({ from, to }) => [Math.log2(Math.abs(from)), Math.log2(Math.abs(to))]);
  const most = bins.length === 0 ? 1 : Math.max(...ends);
  const least = bins.length === 0 ? 0 : Math.max(Math.min(...ends), most - MOST_DOUBLINGS);
  const bare = { least, most, isWhole, highest: 1, below: bins.some(({ to }) => to < 0) };
  const axis = { ...bare, above: !bare.below || bins.some(({ from }) => from > 0) };
  const heights = shapes.flatMap((shape) => steps(shape, axis).map(({ height }) => height));
  return { ...axis, highest: Math.max(...heights, Number.MIN_VALUE) };
}

/** One arm's outline over the axis, another's behind it for comparison, and at 0 an upright as high as its share. */
export function distributionStrip(own: DrawnShape, behind: DrawnShape | null, axis: SizeAxis): TopLevelSpec {
  const base = ROW - 1;
  const all = Math.max(1, own.shape.units);
  const zero = middle(axis);
  const top = base - (own.shape.zero / all) * FULL * ROW;
  const outline = ({ shape }: DrawnShape): Point[] =>
    outlines(steps(shape, axis)).map(({ x, height, group }) => ({
      x,
      y: base - (height / axis.highest) * FULL * ROW,
      base,
      group,
    }));
  return inPixels(WIDTH, ROW, [
    strokes([1, 0], theme.line, [{ x: 0, y: base, toX: WIDTH, toY: base }]),
    strokes([1, 0], theme.ink, own.shape.zero === 0 ? [] : box(zero, top, base)),
    ...(behind === null ? [] : [line(behind.dash, theme.quiet, outline(behind))]),
    line(own.dash, theme.ink, outline(own), 1.5),
  ]);
}

function box(x: number, top: number, base: number): Stroke[] {
  const [left, right] = [x - BAR, x + BAR];
  return [
    { x: left, y: base, toX: left, toY: top },
    { x: left, y: top, toX: right, toY: top },
    { x: right, y: top, toX: right, toY: base },
  ];
}

/** The share of units with a value farther from 0, each arm a line; each line of the scale is a tenth of the one above. */
export function tails(arms: readonly DrawnShape[], axis: SizeAxis, label: (value: number) => string): TopLevelSpec {
  const decades = Math.max(1, Math.ceil(-Math.log10(Math.min(1, ...arms.flatMap(({ shape }) => leastShare(shape))))));
  const height = (share: number) => HEAD + (-Math.log10(share) / decades) * TAIL;
  const levels = Array.from({ length: decades + 1 }, (_, i) => i);
  const shown = levels.filter((i) => i % Math.ceil((decades + 1) / 7) === 0);
  const grid = shown.flatMap((i) =>
    sides(axis).map(({ from, to }) => ({ x: from, y: height(10 ** -i), toX: to, toY: height(10 ** -i) })),
  );
  const base = HEAD + TAIL;
  return inPixels(WIDTH, base + FOOT, [
    strokes([1, 3], theme.line, grid),
    ...arms.map(({ shape, dash }) => line(dash, theme.ink, tailPoints(shape, axis, height), 1.5)),
    ...ticked(axis, base, label),
    letters(
      "center",
      theme.quiet,
      shown.map((i) => ({
        x: middle(axis),
        y: height(10 ** -i) + 4,
        text: i === 0 ? "all" : `1 in ${label(10 ** i)}`,
      })),
    ),
  ]);
}

/** The smallest share that its line shows. */
function leastShare(shape: Shape): number[] {
  const ends = [shape.bins.findLast(({ from }) => from > 0)?.from, shape.bins.find(({ to }) => to < 0)?.to];
  return ends.flatMap((edge) => (edge === undefined ? [] : [beyond(shape, edge) / shape.units]));
}

function tailPoints(shape: Shape, axis: SizeAxis, height: (share: number) => number): Point[] {
  if (shape.units === 0) return [];
  const point = (edge: number, group: number): Point[] => {
    const share = beyond(shape, edge) / shape.units;
    return share === 0 ? [] : [{ x: placed(edge, axis), y: height(share), base: 0, group }];
  };
  const above = shape.bins.filter(({ from }) => from > 0).map(({ from }) => from);
  const below = shape.bins.filter(({ to }) => to < 0).map(({ to }) => to);
  return [...below.flatMap((edge) => point(edge, 0)), ...above.flatMap((edge) => point(edge, 1))];
}

/** The axis alone, under the strips. */
export function sizeScale(axis: SizeAxis, label: (value: number) => string): TopLevelSpec {
  return inPixels(WIDTH, FOOT, ticked(axis, 0, label, true));
}

function ticked(axis: SizeAxis, base: number, label: (value: number) => string, hasZero = false) {
  const ticks = ticksOf(axis, label);
  const zero: Letters[] = hasZero ? [{ x: middle(axis), y: base + 17, text: "0" }] : [];
  return [
    strokes([1, 0], theme.line, [
      ...sides(axis).map(({ from, to }) => ({ x: from, y: base, toX: to, toY: base })),
      ...ticks.map(({ x }) => ({ x, y: base, toX: x, toY: base + 4 })),
    ]),
    letters("center", theme.quiet, [...zero, ...ticks.map(({ x, text }) => ({ x, y: base + 17, text }))]),
  ];
}

const CANDIDATES: readonly (readonly [multiples: readonly number[], every: number])[] = [
  [[1, 2, 5], 1],
  [[1, 5], 1],
  [[1], 1],
  [[1], 2],
  [[1], 3],
  [[1], 6],
];

/** As many round numbers as have room for their text. */
function ticksOf(axis: SizeAxis, label: (value: number) => string): Letters[] {
  const signs = [...(axis.below ? [-1] : []), ...(axis.above ? [1] : [])];
  for (const [multiples, every] of CANDIDATES) {
    const ticks = signs
      .flatMap((sign) =>
        decadesOf(axis, every).flatMap((decade) =>
          multiples.map((multiple) => sign * Number((multiple * 10 ** decade).toPrecision(1))),
        ),
      )
      .filter((value) => isOnAxis(value, axis))
      .map((value) => ({ x: tickPlace(value, axis), y: 0, text: label(value) }))
      .filter(isInside)
      .sort((a, b) => a.x - b.x);
    if (ticks.every((tick, i) => fits(tick, ticks[i + 1]))) return ticks;
  }
  return [];
}

function decadesOf({ least, most }: SizeAxis, every: number): number[] {
  const first = Math.floor(least * Math.log10(2));
  const last = Math.ceil(most * Math.log10(2));
  return Array.from({ length: last - first + 1 }, (_, i) => first + i).filter((decade) => decade % every === 0);
}

const halfOf = ({ text }: Letters) => (text.length * LETTER) / 2;

function isInside(tick: Letters): boolean {
  return tick.x + halfOf(tick) <= WIDTH && tick.x - halfOf(tick) >= 0;
}

function fits(tick: Letters, next: Letters | undefined): boolean {
  return next === undefined || next.x - tick.x > halfOf(tick) + halfOf(next) + 6;
}

function isOnAxis(value: number, { least, most, isWhole }: SizeAxis): boolean {
  const size = Math.log2(Math.abs(value));
  return size >= least && (isWhole ? size < most : size <= most);
}

/** A small whole number stands in the middle of its bin. */
function tickPlace(value: number, axis: SizeAxis): number {
  return placed(
    axis.isWhole && Math.abs(value) < 8 ? Math.sign(value) * Math.sqrt(value * value + Math.abs(value)) : value,
    axis,
  );
}

function sideWidth({ below, above }: SizeAxis): number {
  return (WIDTH - GAP) / (below && above ? 2 : 1);
}
/** Where zero's column has its middle. */
function middle(axis: SizeAxis): number {
  return (axis.below ? sideWidth(axis) : 0) + GAP / 2;
}

function sides(axis: SizeAxis): { readonly from: number; readonly to: number }[] {
  const zero = middle(axis);
  return [
    ...(axis.below ? [{ from: zero - GAP / 2 - sideWidth(axis), to: zero - GAP / 2 }] : []),
    ...(axis.above ? [{ from: zero + GAP / 2, to: zero + GAP / 2 + sideWidth(axis) }] : []),
  ];
}

/** Where a value that is not 0 stands. */
function placed(value: number, axis: SizeAxis): number {
  const { least, most } = axis;
  const part = Math.min(1, Math.max(0, (Math.log2(Math.abs(value)) - least) / (most - least || 1)));
  return middle(axis) + Math.sign(value) * (GAP / 2 + part * sideWidth(axis));
}

interface Step {
  readonly from: number;
  readonly to: number;
  /** The share of units, over the bin's width in doublings. */
  readonly height: number;
}

/** Bins as they are drawn, in pixels; those before the axis begins stand together in its first quarter of a doubling. */
function steps({ bins, units }: Shape, axis: SizeAxis): Step[] {
  const found = new Map<number, Step>();
  for (const bin of bins) {
    const { from, to } = drawnBin(bin, axis);
    const height = bin.units / Math.max(1, units) / Math.log2(Math.max(from / to, to / from));
    const [left, right] = [placed(from, axis), placed(to, axis)];
    found.set(left, { from: left, to: right, height: height + (found.get(left)?.height ?? 0) });
  }
  return [...found.values()].sort((a, b) => a.from - b.from);
}

function drawnBin({ from, to }: Bin, { least }: SizeAxis): { readonly from: number; readonly to: number } {
  const edge = 2 ** least;
  if (from > 0 && from < edge) return { from: edge, to: edge * 1.25 };
  if (to < 0 && to > -edge) return { from: -edge * 1.25, to: -edge };
  return { from, to };
}

/** The upper edges of steps as one line a run: up from the axis at its beginning, and down to it at its end. */
function outlines(all: readonly Step[]): { readonly x: number; readonly height: number; readonly group: number }[] {
  let group = 0;
  return all.flatMap(({ from, to, height }, i) => {
    const before = all[i - 1];
    const after = all[i + 1];
    const begins = before === undefined || before.to < from - 1e-6;
    const ends = after === undefined || after.from > to + 1e-6;
    if (begins) group += 1;
    return [
      ...(begins ? [{ x: from, height: 0, group }] : []),
      { x: from, height, group },
      { x: to, height, group },
      ...(ends ? [{ x: to, height: 0, group }] : []),
    ];
  });
}
