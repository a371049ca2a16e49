import type { TopLevelSpec } from "vega-lite";
import { type AxisWords, framed, placesOf, rangeOf } from "./frame.ts";
import { pixels } from "./pixels.ts";
import { theme } from "./theme.ts";

/** The effect on one day since enrolment; an end without a limit is null. */
export interface DayPoint {
  readonly day: number;
  readonly estimate: number;
  readonly low: number | null;
  readonly high: number | null;
}

const SQUARE = 40;

/** The effect on each day since enrolment: a square with its interval as a thin upright, and a level line at no difference. */
export function days(points: readonly DayPoint[], words: AxisWords): TopLevelSpec {
  const known = points.flatMap(({ estimate, low, high }) => [estimate, low, high]).filter((end) => end !== null);
  const y = rangeOf([0, ...known]);
  const last = Math.max(...points.map(({ day }) => day));
  const every = Math.max(1, Math.ceil(last / 7));
  const ticks = Array.from({ length: Math.floor(last / every) + 1 }, (_, i) => i * every);
  const x = { low: -0.5, high: last + 0.5, ticks };
  const at = placesOf(x, y);
  const values = points.map(({ day, estimate, low, high }) => ({
    day: at.x(day),
    estimate: at.y(estimate),
    low: at.y(low ?? y.low),
    high: at.y(high ?? y.high),
  }));
  return framed(x, y, words, [
    {
      data: { values },
      mark: { type: "rule", color: theme.ink, strokeWidth: 1.5 },
      encoding: { x: pixels("day"), y: pixels("low"), y2: { field: "high" } },
    },
    {
      data: { values },
      mark: { type: "point", shape: "square", filled: true, opacity: 1, size: SQUARE, color: theme.ink },
      encoding: { x: pixels("day"), y: pixels("estimate") },
    },
  ]);
}
