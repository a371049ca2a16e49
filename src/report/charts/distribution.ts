import type { TopLevelSpec } from "vega-lite";
import { type Bin, beyond, type Shape } from "../../cells/index.ts";
import { inPixels, letters, line, type Point, type Stroke, strokes } from "./pixels.ts";
import { FOOT, middle, placed, type SizeAxis, sides, ticked, WIDTH } from "./size-axis.ts";
import { theme } from "./theme.ts";

/** One arm, and the dashes that its lines have wherever they are drawn. */
export interface DrawnShape {
  readonly shape: Shape;
  readonly dash: readonly number[];
}

const ROW = 64;
const FULL = 0.74;
const BAR = 9;
const TAIL = 130;
const HEAD = 8;
/** Sizes under a millionth of the largest stand at the beginning of the axis. */
const MOST_DOUBLINGS = 20;

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
