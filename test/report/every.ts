import type { ReportInputs } from "../../src/report/types.ts";
import { adjustedCase } from "./adjusted-case.ts";
import { adopt, keepControl, little, notSettled, several, undecidable } from "./cases.ts";
import { farFromNormal } from "./drawn.ts";
import { grouped } from "./groups.ts";
import { hostile, hostileMeanwhile } from "./hostile.ts";
import { atALook, meanwhile } from "./meanwhile.ts";
import { quantiles } from "./quantiles.ts";
import { secondRun, thirdRun, undecidableRerun } from "./rerun-case.ts";

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
  ["incidents", meanwhile],
  ["an interim look", atALook],
  ["days and levels", grouped],
  ["hostile", hostile],
  ["a second run", secondRun],
  ["a third run with another rule", thirdRun],
  ["a rerun of which nothing can be decided", undecidableRerun],
  ["hostile incidents", hostileMeanwhile],
];
