import type { Arm } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { shapedArm } from "./shaped-arm.ts";
import { type TailLevel, tails } from "./tails.ts";
import type { Absent } from "./types.ts";

/**
 * How far the tails of the normal interval of two arms are off, by their own moments (`tails`).
 * @param z the critical value of the interval
 * @returns as `shapedArm` and `tails`
 */
export function tailLevel(control: Arm, variant: Arm, z: number): TailLevel | Absent {
  const [c, t] = [shapedArm(control), shapedArm(variant)];
  if (isAbsent(c)) return c;
  if (isAbsent(t)) return t;
  const found = tails(c, t, z);
  return isAbsent(found) ? found : found.level;
}
