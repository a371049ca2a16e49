import { reach, shareDifference } from "./newcombe.ts";
import { lowerRatioLimit, upperRatioLimit } from "./ratio-limits.ts";
import { relativeOf } from "./relative.ts";
import { type Counts, exactShare } from "./share.ts";
import type { Absent, Relative } from "./types.ts";
import { wilson } from "./wilson.ts";

/**
 * Relative difference of two shares, p_t / p_c - 1, recovered from their Wilson limits (MOVER for a ratio): for few events.
 *
 *   low: the smallest r with p_t - r p_c >= -sqrt((p_t - l_t)^2 + r^2 (u_c - p_c)^2), minus 1; high likewise with u_t, l_c
 * The same as
 *   L = (p_t p_c - sqrt((p_t p_c)^2 - l_t u_c (2 p_t - l_t) (2 p_c - u_c))) / (u_c (2 p_c - u_c))
 * but in the form that neither cancels nor divides by 0 at u_c = 2 p_c (ratio-limits.ts). Excludes 0 exactly when
 * Newcombe's interval at the same z does.
 * @returns `control-near-zero` where p_c = 0; elsewhere l_c is above 0 and both ends are bounded
 *
 * Source: Donner and Zou 2012, Statistical Methods in Medical Research 21, 347-359, eq. 9; Wilson 1927.
 */
export function moverRatio(control: Counts, variant: Counts, z: number): Relative | Absent {
  if (control.successes === 0) return { absent: "control-near-zero" };
  const [c, t] = [wilson(control, z), wilson(variant, z)];
  const terms = { control: c.share, variant: t.share, difference: shareDifference(control, variant) };
  return {
    estimate: relativeOf(exactShare(control), exactShare(variant)),
    // With no event l_t is 0, and so is the ratio's lower end, whatever the control's limits.
    low:
      variant.successes === 0
        ? -1
        : lowerRatioLimit({
            ...terms,
            halfControl: c.above,
            halfVariant: t.below,
            half: reach(c, t),
          }),
    high: upperRatioLimit({
      ...terms,
      halfControl: c.below,
      halfVariant: t.above,
      half: reach(t, c),
    }),
  };
}
