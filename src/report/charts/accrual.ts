import type { TopLevelSpec } from "vega-lite";
import { type Axes, framed, type Layer, placed, rangeOf } from "./frame.ts";
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

type Words = Pick<Axes, "xTitle" | "xLabel" | "yLabel">;

/**
 * The effect against the number of units: the estimate as a line with its points, its pointwise interval as two thin
 * lines, the band that holds on all days at once as an area, which the frame cuts where it is far wider than the rest.
 */
export function accrual(points: readonly AccrualPoint[], words: Words): TopLevelSpec {
  const last = points.at(-1);
  const known = (values: readonly (number | null | undefined)[]) => values.filter((value) => value != null);
  const y = rangeOf([
    0,
    ...known(points.flatMap(({ estimate, low, high }) => [estimate, low, high])),
    ...known([last?.bandLow, last?.bandHigh]),
  ]);
  const x = rangeOf([0, ...points.map(({ units }) => units)], 4);
  const inside = (value: number) => Math.min(y.high, Math.max(y.low, value));
  const values = points.map(({ units, estimate, low, high, bandLow, bandHigh }) => ({
    units,
    estimate,
    low: inside(low ?? y.low),
    high: inside(high ?? y.high),
    bandLow: inside(bandLow ?? y.low),
    bandHigh: inside(bandHigh ?? y.high),
  }));
  const axes = { x: { ...x, low: 0 }, y, ...words };
  const at = placed("units", axes.x);
  const line = (field: string, dash: readonly number[], color: string): Layer => ({
    data: { values },
    mark: { type: "line", color, strokeWidth: 1.25, strokeDash: [...dash] },
    encoding: { x: at, y: placed(field, y) },
  });
  return framed(axes, [
    {
      data: { values },
      mark: { type: "area", color: theme.ink, opacity: 0.12 },
      encoding: { x: at, y: placed("bandLow", y), y2: { field: "bandHigh" } },
    },
    line("low", [4, 2], theme.quiet),
    line("high", [4, 2], theme.quiet),
    line("estimate", [1, 0], theme.ink),
    {
      data: { values },
      mark: { type: "point", shape: "square", filled: true, opacity: 1, size: 18, color: theme.ink },
      encoding: { x: at, y: placed("estimate", y) },
    },
  ]);
}
