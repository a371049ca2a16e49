import type { TopLevelSpec } from "vega-lite";
import { type Layer, pixels } from "./pixels.ts";
import { theme } from "./theme.ts";
import { roundTicks } from "./ticks.ts";

/** A drawing of figures over two axes; its places are pixels, so that axis and marks cannot disagree. */

/** A narrow screen shows it at its own size, so that its letters stay legible. */
const WIDTH = 340;
const HEIGHT = 240;
const LEFT = 52;
const RIGHT = 6;
const TOP = 8;
const BOTTOM = 44;
const TICK = 4;
const MARGIN = 0.05;
/** About the width of a letter of the axis. */
const LETTER = 6.5;

/** A range of values with round numbers to be written at it. */
export interface Range {
  readonly low: number;
  readonly high: number;
  readonly ticks: readonly number[];
}

/** From the least to the largest of some values, with a little room; a range of no width gets some. */
export function rangeOf(values: readonly number[], about = 5): Range {
  const [from, to] = [Math.min(...values), Math.max(...values)];
  const room = to - from || Math.abs(to) || 1;
  const [low, high] = [from - MARGIN * room, to + MARGIN * room];
  return { low, high, ticks: roundTicks(low, high, about) };
}

/** What the axes are called and how their numbers are written. */
export interface AxisWords {
  readonly xTitle: string;
  readonly xLabel: (value: number) => string;
  readonly yLabel: (value: number) => string;
}

/** Where a value lies on the drawing; what lies beyond the range is held at its edge. */
export interface Places {
  readonly x: (value: number) => number;
  readonly y: (value: number) => number;
}

export function placesOf(x: Range, y: Range): Places {
  const share = (value: number, { low, high }: Range) => (Math.min(high, Math.max(low, value)) - low) / (high - low);
  return {
    x: (value) => LEFT + share(value, x) * (WIDTH - LEFT - RIGHT),
    y: (value) => HEIGHT - BOTTOM - share(value, y) * (HEIGHT - TOP - BOTTOM),
  };
}

/** Marks over both axes, with a line at no difference where the range reaches it. */
export function framed(x: Range, y: Range, words: AxisWords, marks: readonly Layer[]): TopLevelSpec {
  const at = placesOf(x, y);
  const [left, bottom] = [LEFT, HEIGHT - BOTTOM];
  return {
    $schema: "https://vega.github.io/schema/vega-lite/v6.json",
    width: WIDTH,
    height: HEIGHT,
    padding: 0,
    autosize: "none",
    background: "transparent",
    config: { aria: false, view: { stroke: null } },
    layer: [
      strokes([
        { x: left, y: TOP, toX: left, toY: bottom },
        { x: left, y: bottom, toX: WIDTH - RIGHT, toY: bottom },
        ...y.ticks.map((tick) => ({ x: left - TICK, y: at.y(tick), toX: left, toY: at.y(tick) })),
        ...x.ticks.map((tick) => ({ x: at.x(tick), y: bottom, toX: at.x(tick), toY: bottom + TICK })),
        ...(y.low < 0 && y.high > 0 ? [{ x: left, y: at.y(0), toX: WIDTH - RIGHT, toY: at.y(0) }] : []),
      ]),
      letters(
        "right",
        y.ticks.map((tick) => ({ x: left - TICK - 3, y: at.y(tick) + 4, text: words.yLabel(tick) })),
      ),
      letters(
        "center",
        x.ticks.map((tick) => ({ ...within(at.x(tick), words.xLabel(tick)), y: bottom + TICK + 13 })),
      ),
      letters("right", [{ x: WIDTH - RIGHT, y: HEIGHT - 6, text: words.xTitle }]),
      ...marks,
    ],
  };
}

/** A text about its place, moved in where it would reach over the drawing's edge. */
function within(x: number, text: string): { readonly x: number; readonly text: string } {
  const half = (text.length * LETTER) / 2;
  return { x: Math.min(x, WIDTH - half), text };
}

type Stroke = Readonly<Record<"x" | "y" | "toX" | "toY", number>>;

function strokes(from: readonly Stroke[]): Layer {
  return {
    data: { values: [...from] },
    mark: { type: "rule", color: theme.line, strokeWidth: 1 },
    encoding: { x: pixels("x"), y: pixels("y"), x2: { field: "toX" }, y2: { field: "toY" } },
  };
}

type Letters = { readonly x: number; readonly y: number; readonly text: string };

function letters(align: "left" | "center" | "right", texts: readonly Letters[]): Layer {
  return {
    data: { values: [...texts] },
    mark: {
      type: "text",
      align,
      baseline: "alphabetic",
      color: theme.quiet,
      font: theme.font,
      fontSize: theme.letters - 1,
    },
    encoding: { x: pixels("x"), y: pixels("y"), text: { field: "text", type: "nominal" } },
  };
}
