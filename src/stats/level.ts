import type { Arm } from "../cells/types.ts";
import { adjustedLevel } from "./adjusted-arm.ts";
import { meanLevel } from "./mean.ts";
import { quantileLevel } from "./quantile-arms.ts";
import { ratioOfTotals } from "./ratio-of-totals.ts";
import { share } from "./share.ts";
import type { Absent, Level } from "./types.ts";

/** The level of an arm, of whichever kind: what the contrasts compare. */
export function level(arm: Arm): Level | Absent {
  switch (arm.kind) {
    case "mean":
      return meanLevel(arm.sums);
    case "proportion":
      return share(arm.sums);
    case "ratio":
      return ratioOfTotals(arm);
    case "quantile":
      return quantileLevel(arm);
    case "adjusted":
      return adjustedLevel(arm);
    default:
      return unknown(arm);
  }
}

function unknown(arm: never): never {
  throw new Error(`no level of the arm ${String(arm)}`);
}
