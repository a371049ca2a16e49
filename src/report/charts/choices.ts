import type { TopLevelSpec } from "vega-lite";
import type { Interval } from "../../words/index.ts";
import { type ForestAxis, type ForestRow, forestAxis, forestStrip, upright } from "./forest.ts";
import type { Layer } from "./pixels.ts";
import { theme } from "./theme.ts";

/** One choice of the figure: its interval, and whether it is the plan's own. */
export interface ChoiceMark {
  readonly interval: Interval;
  readonly isPlanned: boolean;
}

/** The axis that all choices of a figure share; `mark` is what was asked for, or the limit. */
export function choiceAxis(marks: readonly ChoiceMark[], mark: number | null): ForestAxis {
  return forestAxis(marks.map((one) => rowOf(one, mark)));
}

/**
 * One choice's drawing, as a row of the forest plot: a thin line and a square, filled for the plan's own choice and hollow
 * for the others, with the plan's own estimate as a dotted line through all rows. Null: the lines alone.
 */
export function choiceStrip(
  one: ChoiceMark | null,
  planned: number | null,
  mark: number | null,
  axis: ForestAxis,
): TopLevelSpec {
  return forestStrip(one === null ? null : rowOf(one, mark), axis, planned === null ? [] : [dotted(planned, axis)]);
}

function dotted(planned: number, axis: ForestAxis): Layer {
  return upright({ type: "rule", color: theme.line, strokeWidth: 1, strokeDash: [1, 3] }, planned, axis);
}

function rowOf({ interval, isPlanned }: ChoiceMark, mark: number | null): ForestRow {
  return {
    relative: interval,
    mark,
    decides: true,
    style: { dash: [1, 0], fill: isPlanned ? theme.ink : theme.paper },
  };
}
