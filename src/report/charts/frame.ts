import type { TopLevelSpec } from "vega-lite";
import { theme } from "./theme.ts";
import { roundTicks } from "./ticks.ts";

/** A drawing of figures over an axis: at its own size on a narrow screen, so that its letters stay legible. */
export type Layer = Extract<TopLevelSpec, { layer: unknown }>["layer"][number];

const WIDTH = 340;
const HEIGHT = 190;
const LEFT = 58;
const BELOW = 40;
const ABOVE = 8;
const MARGIN = 0.05;

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

/** How the two axes are named and written. */
export interface Axes {
  readonly x: Range;
  readonly y: Range;
  readonly xTitle: string;
  readonly xLabel: (value: number) => string;
  readonly yLabel: (value: number) => string;
}

/** Layers over both axes, with a line at no difference; marks take their places from `placed`. */
export function framed(axes: Axes, layers: readonly Layer[]): TopLevelSpec {
  return {
    $schema: "https://vega.github.io/schema/vega-lite/v6.json",
    width: WIDTH - LEFT,
    height: HEIGHT,
    padding: { left: LEFT, right: 8, top: ABOVE, bottom: BELOW },
    autosize: "none",
    background: "transparent",
    data: { values: [{}] },
    config: { aria: false, view: { stroke: null } },
    layer: [zeroLine(axes), ...layers],
  };
}

/** The axes belong to the first layer, so that they are drawn once; a range that does not reach 0 has no line. */
function zeroLine(axes: Axes): Layer {
  const reachesZero = axes.y.low <= 0 && axes.y.high >= 0;
  return {
    mark: { type: "rule", color: theme.line, strokeWidth: 1, opacity: reachesZero ? 1 : 0 },
    encoding: {
      y: {
        datum: reachesZero ? 0 : axes.y.low,
        type: "quantitative",
        scale: scaleOf(axes.y),
        axis: axisOf(axes.y, axes.yLabel, null),
      },
      x: {
        datum: axes.x.low,
        type: "quantitative",
        scale: scaleOf(axes.x),
        axis: axisOf(axes.x, axes.xLabel, axes.xTitle),
      },
      x2: { datum: axes.x.high },
    },
  };
}

/** A field of the data at its place on one of the axes. */
export const placed = (field: string, range: Range) =>
  ({ field, type: "quantitative", scale: scaleOf(range), axis: null }) as const;

const scaleOf = ({ low, high }: Range) => ({ domain: [low, high], nice: false, zero: false });

function axisOf({ ticks }: Range, label: (value: number) => string, title: string | null) {
  const labels = Object.fromEntries(ticks.map((tick) => [String(tick), label(tick)]));
  return {
    values: [...ticks],
    labelExpr: `${JSON.stringify(labels)}[toString(datum.value)]`,
    title,
    titleFont: theme.font,
    titleFontSize: theme.letters - 1,
    titleFontWeight: "normal" as const,
    titleColor: theme.quiet,
    titlePadding: 6,
    grid: false,
    labelFont: theme.font,
    labelFontSize: theme.letters - 1,
    labelColor: theme.quiet,
    labelOverlap: false,
    domainColor: theme.line,
    tickColor: theme.line,
  };
}
