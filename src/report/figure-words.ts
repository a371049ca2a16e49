import { MINUS, plain, quoted, type Scale } from "../words/index.ts";
import { sixDigits } from "./effect-text.ts";

/** What an axis or a table of differences is in. */
export function scaleText(scale: Scale, control = ""): string {
  switch (scale.kind) {
    case "percent":
      return `Difference in percent of the level with ${quoted(control)}`;
    case "points":
      return "Difference in percentage points";
    case "amount":
      return scale.unit === null ? "Difference" : `Difference in ${scale.unit}`;
  }
}

/** "+2.5%", "−0.4", "0": a value at a tick of an axis. */
export function axisLabel(tick: number, scale: Scale): string {
  const size = scale.kind === "amount" ? Math.abs(tick) : Math.abs(tick) * 100;
  const text = plain(Number(size.toPrecision(3))) + (scale.kind === "percent" ? "%" : "");
  return tick === 0 ? "0" : `${tick > 0 ? "+" : MINUS}${text}`;
}

/** Figures of a table of numbers, six digits each. */
export const figures = (values: readonly (number | null)[]): string[] => values.map(sixDigits);
