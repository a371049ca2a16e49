import { type Accrual, type DaysSince, levelSentence, type Subgroup, type SubgroupLevel } from "../decision/index.ts";
import type { Effect } from "../decision/types.ts";
import type { Plan } from "../plan/types.ts";
import { isAbsent } from "../stats/index.ts";
import type { AccrualJson, DifferenceJson, SinceEnrolmentJson, SubgroupJson } from "./json-types.ts";
import { isoDay } from "./sections/weekdays.ts";

/** `subgroups`, `accrual` and `sinceEnrolment` of report.json (DESIGN 7). */

export function subgroupJson(subgroup: Subgroup, effects: readonly Effect[], plan: Plan): SubgroupJson {
  const { column, metric, variant, levels, heterogeneity } = subgroup;
  const effect = effects.find((one) => one.metric === metric && one.variant === variant);
  if (effect === undefined) throw new Error(`a subgroup of ${metric} and ${variant} without an effect`);
  return {
    column,
    metric,
    variant,
    levels: levels.map((row) => levelJson(row, levelSentence(row, subgroup, effect, plan))),
    heterogeneity,
  };
}

function levelJson(row: SubgroupLevel, sentence: string): SubgroupJson["levels"][number] {
  const { level, units, contrast, pAdjusted, standing } = row;
  return {
    level: level.kind === "value" ? level.text : null,
    kind: level.kind,
    units: units.control + units.variant,
    difference: isAbsent(contrast) ? NO_DIFFERENCE : { ...differenceOf(contrast.difference), pAdjusted },
    relative:
      isAbsent(contrast) || "absent" in contrast.relative
        ? null
        : { estimate: contrast.relative.estimate, low: contrast.relative.low, high: contrast.relative.high },
    standing,
    sentence,
  };
}

function differenceOf({ estimate, standardError, low, high, z, p, method }: Omit<DifferenceJson, "pAdjusted">) {
  return { estimate, standardError, low, high, z, p, method };
}

const NO_DIFFERENCE: DifferenceJson = {
  estimate: null,
  standardError: null,
  low: null,
  high: null,
  z: null,
  p: null,
  pAdjusted: null,
  method: "normal",
};

export function accrualJson({ metric, variant, band, days }: Accrual): AccrualJson {
  return {
    metric,
    variant,
    band: { units: band.planned, planned: band.isPlanned },
    days: days.map(({ day, ...row }) => ({ day: isoDay(day), ...row })),
  };
}

export function sinceEnrolmentJson({ metric, variant, units, days, trend }: DaysSince): SinceEnrolmentJson {
  return {
    metric,
    variant,
    units: units.control + units.variant,
    days: days.map(({ difference: { estimate, low, high, p } }, day) => ({ day, estimate, low, high, p })),
    trend,
  };
}
