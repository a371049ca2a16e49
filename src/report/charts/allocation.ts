import type { TopLevelSpec } from "vega-lite";
import { type AxisWords, framed, placesOf, rangeOf } from "./frame.ts";
import { type Layer, pixels } from "./pixels.ts";
import { theme } from "./theme.ts";

/** One variant's share of the units that enrolled on a day, and between what chance alone holds it. */
export interface AllocationDay {
  /** Days since 1970-01-01. */
  readonly day: number;
  readonly share: number;
  readonly low: number;
  readonly high: number;
}

/** A square a day, the planned share as a level dotted line, and what chance allows of it as two dashed lines. */
export function allocation(days: readonly AllocationDay[], planned: number, words: AxisWords): TopLevelSpec {
  const y = rangeOf([planned, ...days.flatMap(({ share, low, high }) => [share, low, high])]);
  const x = rangeOf(
    days.map(({ day }) => day),
    4,
  );
  const at = placesOf(x, y);
  const values = days.map(({ day, share, low, high }) => ({
    day: at.x(day),
    share: at.y(share),
    low: at.y(low),
    high: at.y(high),
    planned: at.y(planned),
  }));
  const line = (field: string, dash: readonly number[]): Layer => ({
    data: { values },
    mark: { type: "line", color: theme.quiet, strokeWidth: 1.25, strokeDash: [...dash] },
    encoding: { x: pixels("day"), y: pixels(field), order: { value: 0 } },
  });
  return framed(x, y, words, [
    line("planned", theme.dotted),
    line("low", [4, 2]),
    line("high", [4, 2]),
    {
      data: { values },
      mark: { type: "point", shape: "square", filled: true, opacity: 1, size: 20, color: theme.ink },
      encoding: { x: pixels("day"), y: pixels("share") },
    },
  ]);
}
