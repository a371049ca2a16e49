import type { TopLevelSpec } from "vega-lite";
import { inPixels, type Stroke, strokes } from "./pixels.ts";
import { theme } from "./theme.ts";

/** What the stem beside a line of the flow does: it begins, goes on, lets some leave to the right, or ends there. */
export type Stem = "begins" | "goes-on" | "leaves" | "ends";

const WIDTH = 24;
/** Far taller than a line of text: the line's cell cuts it, so that the stem runs through whatever the line's height. */
const HEIGHT = 400;
const MIDDLE = HEIGHT / 2;
const AT = 6;

/** The stem of the flow of units, one line's piece of it. */
export function flowStem(stem: Stem): TopLevelSpec {
  const through: Stroke = {
    x: AT,
    y: stem === "begins" ? MIDDLE : 0,
    toX: AT,
    toY: stem === "ends" ? MIDDLE : HEIGHT,
  };
  const branch: Stroke[] = stem === "leaves" ? [{ x: AT, y: MIDDLE, toX: WIDTH - 4, toY: MIDDLE }] : [];
  const knot: Stroke[] =
    stem === "begins" || stem === "ends" ? [{ x: AT - 5, y: MIDDLE, toX: AT + 5, toY: MIDDLE }] : [];
  return inPixels(WIDTH, HEIGHT, [
    strokes([1, 0], theme.line, [through, ...branch]),
    strokes([1, 0], theme.ink, knot, 2),
  ]);
}
