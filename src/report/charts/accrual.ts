import type { TopLevelSpec } from "vega-lite";
import { type AxisWords, framed, type Places, placesOf, type Range, rangeOf } from "./frame.ts";
import { type Layer, pixels } from "./pixels.ts";
import { theme } from "./theme.ts";

/** The effect when so many units were in; an end without a limit is null. */
export interface AccrualPoint {
  readonly units: number;
  readonly estimate: number;
  readonly low: number | null;
  readonly high: number | null;
  readonly bandLow: number | null;
  readonly bandHigh: number | null;
}

/** What happened while units enrolled: from so many in to so many. */
export interface AccrualMark {
  readonly letter: string;
  readonly from: number;
  readonly to: number;
  /** Whether it had begun before the first point, so that nothing shows where. */
  readonly isBegun: boolean;
}

/**
 * The effect against the number of units: the estimate as a line with a square for each day, its pointwise interval as two
 * dashed lines, the band that holds on all days at once as an area. The frame cuts the band where it is far wider than it
 * is at the end. A mark is a dotted upright where it begins, and a line along the top to where it ends.
 */
export function accrual(
  points: readonly AccrualPoint[],
  words: AxisWords,
  marks: readonly AccrualMark[] = [],
): TopLevelSpec {
  const last = points.at(-1);
  const known = (values: readonly (number | null | undefined)[]) => values.filter((value) => value != null);
  const y = rangeOf([
    0,
    ...known(points.flatMap(({ estimate, low, high }) => [estimate, low, high])),
    ...known([last?.bandLow, last?.bandHigh]),
  ]);
  const x = { ...rangeOf([0, ...points.map(({ units }) => units)], 4), low: 0 };
  const at = placesOf(x, y);
  const values = points.map(({ units, estimate, low, high, bandLow, bandHigh }) => ({
    units: at.x(units),
    estimate: at.y(estimate),
    low: at.y(low ?? y.low),
    high: at.y(high ?? y.high),
    bandLow: at.y(bandLow ?? y.low),
    bandHigh: at.y(bandHigh ?? y.high),
  }));
  const line = (field: string, dash: readonly number[], color: string): Layer => ({
    data: { values },
    mark: { type: "line", color, strokeWidth: 1.25, strokeDash: [...dash] },
    encoding: { x: pixels("units"), y: pixels(field), order: { value: 0 } },
  });
  const tick = { ...x, ticks: x.ticks.filter((value) => value >= 0) };
  return framed(tick, y, words, [
    {
      data: { values },
      mark: { type: "area", color: theme.ink, opacity: 0.12 },
      encoding: { x: pixels("units"), y: pixels("bandLow"), y2: { field: "bandHigh" }, order: { value: 0 } },
    },
    line("low", [4, 2], theme.quiet),
    line("high", [4, 2], theme.quiet),
    line("estimate", [1, 0], theme.ink),
    {
      data: { values },
      mark: { type: "point", shape: "square", filled: true, opacity: 1, size: 20, color: theme.ink },
      encoding: { x: pixels("units"), y: pixels("estimate") },
    },
    ...(marks.length === 0 ? [] : markLayers(marks, at, y)),
  ]);
}

const LETTER = 18;
const ROW = 16;
const ROWS = 8;

/** Marks that would lie on one another stand in rows, the first at the top. */
function markLayers(marks: readonly AccrualMark[], at: Places, y: Range): Layer[] {
  const taken: number[] = [];
  const [top, bottom] = [at.y(y.high), at.y(y.low)];
  const values = marks
    .map(({ letter, from, to, isBegun }) => ({ letter, isBegun, x: at.x(from), toX: at.x(to) }))
    .toSorted((a, b) => a.x - b.x)
    .map((mark) => {
      const free = taken.findIndex((end) => end < mark.x);
      const row = free === -1 ? taken.length : free;
      taken[row] = Math.max(mark.toX, mark.x + LETTER);
      const level = top + (row % ROWS) * ROW;
      return { ...mark, top, bottom, level, letterX: mark.x + 3, letterY: level + 12 };
    });
  return [
    {
      data: { values: values.filter(({ isBegun }) => !isBegun) },
      mark: { type: "rule", color: theme.quiet, strokeWidth: 1, strokeDash: [...theme.dotted] },
      encoding: { x: pixels("x"), y: pixels("top"), y2: { field: "bottom" } },
    },
    {
      data: { values },
      mark: { type: "rule", color: theme.quiet, strokeWidth: 2 },
      encoding: { x: pixels("x"), x2: { field: "toX" }, y: pixels("level") },
    },
    {
      data: { values },
      mark: {
        type: "text",
        align: "left",
        baseline: "alphabetic",
        color: theme.ink,
        font: theme.font,
        fontSize: theme.letters - 1,
      },
      encoding: { x: pixels("letterX"), y: pixels("letterY"), text: { field: "letter", type: "nominal" } },
    },
  ];
}
