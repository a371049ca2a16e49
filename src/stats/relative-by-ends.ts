import type { Arm } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { level } from "./level.ts";
import { relative } from "./relative.ts";
import type { Absent, Relative } from "./types.ts";

/**
 * Fieller's interval of the relative difference with a critical value for each end, as an interval of the difference has
 * them that is not symmetric:
 *
 *   low - 1 at (D - low) / SE,   high - 1 at (high - D) / SE
 * so that it excludes 0 exactly when that interval does.
 * @returns absent as `relative` is, and where an end does not lie on its side of the estimate
 */
export function relativeByEnds(
  control: Arm,
  variant: Arm,
  difference: {
    readonly estimate: number;
    readonly standardError: number;
    readonly low: number;
    readonly high: number;
  },
): Relative | Absent {
  const [c, t] = [level(control), level(variant)];
  if (isAbsent(c)) return c;
  if (isAbsent(t)) return t;
  const { estimate, standardError, low, high } = difference;
  const [down, up] = [(estimate - low) / standardError, (high - estimate) / standardError];
  if (!(down > 0 && up > 0)) return { absent: "lost-digits" };
  const [ofLow, ofHigh] = [relative(c, t, down), relative(c, t, up)];
  if (isAbsent(ofLow)) return ofLow;
  return isAbsent(ofHigh) ? ofHigh : { estimate: ofLow.estimate, low: ofLow.low, high: ofHigh.high };
}
