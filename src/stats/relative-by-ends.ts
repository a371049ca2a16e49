import type { Arm } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { bootstrapRelative } from "./bootstrap-t.ts";
import { level } from "./level.ts";
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
  const [lowerQuantile, upperQuantile] = [(estimate - high) / standardError, (estimate - low) / standardError];
  if (!(lowerQuantile < 0 && upperQuantile > 0)) return { absent: "lost-digits" };
  return bootstrapRelative(c, t, { lowerQuantile, upperQuantile });
}
