import type { ChoiceArms } from "../cells/index.ts";
import type { Metric } from "../plan/types.ts";
import type { Absent, Contrast, Relative } from "../stats/types.ts";
import { deciding } from "./deciding.ts";
import type { Effect, Zone } from "./types.ts";
import { placed } from "./zones.ts";

export type ChoiceName =
  | "as-planned"
  | "unadjusted"
  | ChoiceArms["choice"]
  | "normal"
  | "welch"
  | "score"
  | "skew-corrected"
  | "bootstrap-t"
  | "randomisation"
  | "log";

/** One contrast under one choice. */
export interface ChoiceRow {
  readonly choice: ChoiceName;
  /** In the metric's unit; null ends are unbounded or do not exist. */
  readonly difference: Pick<Contrast["difference"], "estimate" | "low" | "high" | "p">;
  readonly relative: Relative | Absent | null;
  /** Null where a choice says only whether there is a difference, and on which side. */
  readonly zone: Zone | null;
  /** Of the estimate: 1 where the variant is higher, -1 where it is lower; null without an estimate. */
  readonly sign: -1 | 0 | 1 | null;
  /** On which side of 0 the interval lies: 1 above, -1 below, 0 neither. */
  readonly side: -1 | 0 | 1;
  /** Whether it puts the contrast where the plan's own choice does: in the same zone, or on the same side of 0. */
  readonly agrees: boolean;
}

type Compared = Pick<Contrast, "difference" | "relative">;

export function planRow(effect: Effect): ChoiceRow {
  const { difference, relative } = deciding(effect);
  return {
    choice: "as-planned",
    difference: bare(difference),
    relative,
    zone: effect.zone,
    sign: signOf(difference.estimate),
    side: sideOf(difference),
    agrees: true,
  };
}

export function row(choice: ChoiceName, compared: Compared, effect: Effect, metric: Metric): ChoiceRow {
  const { zone } = placed(metric, compared);
  return {
    choice,
    difference: bare(compared.difference),
    relative: compared.relative,
    zone,
    sign: signOf(compared.difference.estimate),
    side: sideOf(compared.difference),
    agrees: zone === effect.zone,
  };
}

/** A choice that gives a p and no interval in the metric's unit. */
export function onlyP(choice: ChoiceName, estimate: number, p: number, alpha: number, effect: Effect): ChoiceRow {
  const sign = signOf(estimate);
  const side = p < alpha ? (sign ?? 0) : 0;
  return {
    choice,
    difference: { estimate: null, low: null, high: null, p },
    relative: null,
    zone: null,
    sign,
    side,
    agrees: side === sideOf(deciding(effect).difference),
  };
}

function bare({ estimate, low, high, p }: Contrast["difference"]): ChoiceRow["difference"] {
  return { estimate, low, high, p };
}

function signOf(estimate: number | null): ChoiceRow["sign"] {
  return estimate === null ? null : estimate > 0 ? 1 : estimate < 0 ? -1 : 0;
}

function sideOf({ low, high }: Contrast["difference"]): -1 | 0 | 1 {
  if (low !== null && low > 0) return 1;
  return high !== null && high < 0 ? -1 : 0;
}
