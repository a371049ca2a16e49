import type { TopLevelSpec } from "vega-lite";
import { type AxisWords, framed, type Layer, pixels, placesOf, rangeOf } from "./frame.ts";
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

/**
 * The effect against the number of units: the estimate as a line with a square for each day, its pointwise interval as two
 * dashed lines, the band that holds on all days at once as an area. The frame cuts the band where it is far wider than it
 * is at the end.
 */
export function accrual(points: readonly AccrualPoint[], words: AxisWords): TopLevelSpec {
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
  ]);
}
