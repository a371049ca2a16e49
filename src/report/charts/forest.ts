import type { TopLevelSpec } from "vega-lite";
import type { Relative } from "../../stats/types.ts";
import { type Layer, pixels } from "./pixels.ts";
import { type LineStyle, theme } from "./theme.ts";
import { roundTicks } from "./ticks.ts";

/** One contrast of the forest plot, on the relative scale (0.05 = 5%). */
export interface ForestRow {
  readonly relative: Relative;
  /** The worthwhile effect or the margin, with its sign: where the tick stands. */
  readonly mark: number | null;
  /** Rows for information do not stretch the axis beyond twice what the others need. */
  readonly decides: boolean;
  readonly style: LineStyle;
}

/** The axis that all rows share. */
export interface ForestAxis {
  readonly low: number;
  readonly high: number;
  readonly ticks: readonly number[];
}

const WIDTH = 300;
/** Far taller than a row: the row's cell cuts it, so that the zero line runs through whatever the row's height. */
const HEIGHT = 400;
const MIDDLE = HEIGHT / 2;
const TICK = 9;
const SQUARE = 64;
const AXIS_HEIGHT = 26;
const MARGIN = 0.05;

/** From the rows that decide: every estimate, bounded end and mark, zero always among them. */
export function forestAxis(rows: readonly ForestRow[]): ForestAxis {
  const deciding = rows.filter((row) => row.decides);
  const [low, high] = extent(deciding.length === 0 ? rows : deciding);
  const [lowest, highest] = extent(rows);
  const room = high - low || highest - lowest || 0.1;
  return withTicks(Math.max(lowest, low - room / 2), Math.min(highest, high + room / 2));
}

function extent(rows: readonly ForestRow[]): [number, number] {
  const points = rows.flatMap(({ relative, mark }) => [relative.low, relative.estimate, relative.high, mark]);
  const known = [0, ...points.filter((point) => point !== null)];
  return [Math.min(...known), Math.max(...known)];
}

function withTicks(from: number, to: number): ForestAxis {
  const room = to - from || 0.02;
  const low = from - MARGIN * room;
  const high = to + MARGIN * room;
  return { low, high, ticks: roundTicks(low, high, 5) };
}

/**
 * One row's drawing: zero line, tick, interval as a thin line, estimate as a square; `row` null: the zero line alone.
 * @param behind what else runs through every row, drawn under its marks
 */
export function forestStrip(row: ForestRow | null, axis: ForestAxis, behind: readonly Layer[] = []): TopLevelSpec {
  const zero = upright({ type: "rule", color: theme.line, strokeWidth: 1 }, 0, axis);
  return { ...frame(HEIGHT), layer: [zero, ...behind, ...(row === null ? [] : rowMarks(row, axis))] };
}

function rowMarks({ relative, mark, style }: ForestRow, axis: ForestAxis): Layer[] {
  const inside = (point: number) => point >= axis.low && point <= axis.high;
  const stub = (axis.high - axis.low) / 50;
  // an end without a limit, or beyond the axis, runs to the frame
  const from = Math.min(Math.max(relative.low ?? axis.low, axis.low), axis.high - stub);
  const to = Math.max(Math.min(relative.high ?? axis.high, axis.high), axis.low + stub);
  const line: Layer = {
    data: { values: [{ from: at(from, axis), to: at(to, axis) }] },
    mark: { type: "rule", color: theme.ink, strokeWidth: 1.5, strokeDash: [...style.dash] },
    encoding: { x: pixels("from"), x2: { field: "to" }, y: { value: MIDDLE } },
  };
  const marks: Layer[] = [line];
  if (mark !== null && inside(mark)) {
    marks.unshift(upright({ type: "rule", color: theme.ink, strokeWidth: 1.5 }, mark, axis, TICK));
  }
  if (inside(relative.estimate)) {
    marks.push({
      data: { values: [{ at: at(relative.estimate, axis) }] },
      mark: {
        type: "point",
        shape: "square",
        size: SQUARE,
        filled: true,
        opacity: 1,
        color: style.fill,
        stroke: theme.ink,
        strokeWidth: 1,
      },
      encoding: { x: pixels("at"), y: { value: MIDDLE } },
    });
  }
  return marks;
}

interface RuleMark {
  readonly type: "rule";
  readonly color: string;
  readonly strokeWidth: number;
  readonly strokeDash?: number[];
}

/** An upright line, as high as the drawing or by so much above and below its middle. */
export function upright(mark: RuleMark, value: number, axis: ForestAxis, reach = MIDDLE): Layer {
  return {
    data: { values: [{ at: at(value, axis) }] },
    mark,
    encoding: { x: pixels("at"), y: { value: MIDDLE - reach }, y2: { value: MIDDLE + reach } },
  };
}

/** A place on the axis that all rows share, in pixels: so all rows have one shape, which is compiled once. */
function at(value: number, { low, high }: ForestAxis): number {
  return ((value - low) / (high - low)) * WIDTH;
}

/** The axis below the rows, in percent of the control's level; `label` writes a tick. */
export function forestScale(axis: ForestAxis, label: (tick: number) => string): TopLevelSpec {
  const labels = Object.fromEntries(axis.ticks.map((tick) => [String(tick), label(tick)]));
  return {
    ...frame(AXIS_HEIGHT),
    data: { values: [{}] },
    mark: { type: "rule", color: theme.line, strokeWidth: 1 },
    encoding: {
      y: { value: 0 },
      y2: { value: 0 },
      x: {
        datum: 0,
        type: "quantitative",
        scale: { domain: [axis.low, axis.high], zero: false, nice: false },
        axis: {
          orient: "bottom",
          offset: 1 - AXIS_HEIGHT,
          values: [...axis.ticks],
          labelExpr: `${JSON.stringify(labels)}[toString(datum.value)]`,
          title: null,
          grid: false,
          labelFont: theme.font,
          labelFontSize: theme.letters,
          labelColor: theme.quiet,
          labelOverlap: false,
          domainColor: theme.line,
          tickColor: theme.line,
        },
      },
    },
  };
}

function frame(height: number) {
  return {
    $schema: "https://vega.github.io/schema/vega-lite/v6.json",
    width: WIDTH,
    height,
    padding: 0,
    autosize: "none",
    background: "transparent",
    config: { aria: false, view: { stroke: null } },
  } as const;
}
