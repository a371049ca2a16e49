import type { ReportInputs } from "../../src/report/types.ts";
import { adjustedCase } from "./adjusted-case.ts";
import { adopt, keepControl, little, notSettled, several, undecidable } from "./cases.ts";
import { farFromNormal } from "./drawn.ts";
import { grouped } from "./groups.ts";
import { hostile } from "./hostile.ts";
import { quantiles } from "./quantiles.ts";

/** Every hand-made report, by name. */
export const everyCase: readonly (readonly [name: string, inputs: ReportInputs])[] = [
  ["adopt", adopt],
  ["not settled", notSettled],
  ["keep the control", keepControl],
  ["undecidable", undecidable],
  ["several variants", several],
  ["as little as there can be", little],
  ["far from normal", farFromNormal],
  ["adjusted", adjustedCase],
  ["quantiles", quantiles],
  ["days and levels", grouped],
  ["hostile", hostile],
];
