import { NO_POWER } from "../../src/decision/power.ts";
import type { Effect } from "../../src/decision/types.ts";
import { placed } from "../../src/decision/zones.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import type { Absent, ArmFigures, Contrast } from "../../src/stats/types.ts";
import { metricOf, planOf } from "../checks/make.ts";

export type Ends = readonly [low: number | null, estimate: number, high: number | null];

/** The ferry's three metrics: what decides, what must not get worse, what is for information. */
export const BOOKED = metricOf({ name: "Booked", role: "primary", worthwhile: { kind: "relative", value: 0.05 } });
export const CONTACTS = metricOf({
  name: "Support contacts",
  role: "guardrail",
  summary: "mean",
  goodIs: "lower",
  margin: { kind: "relative", value: 0.05 },
});
export const FARE = metricOf({
  name: "Fare per visitor",
  summary: "mean",
  of: { event: "booking", where: [], aggregate: { kind: "sum", column: "fare" } },
  unitOfMeasure: "kr",
});
export const FERRY: Plan = planOf({ metrics: [BOOKED, CONTACTS, FARE] });

/** A contrast with the given relative interval about a control's mean; the difference is the same, times that mean. */
export function contrastOf(level: number, [low, estimate, high]: Ends): Contrast {
  const times = (end: number | null) => (end === null ? null : end * level);
  return {
    control: armFigures(level),
    variant: armFigures(level * (1 + estimate)),
    difference: {
      estimate: estimate * level,
      standardError: 0.001,
      low: times(low),
      high: times(high),
      z: 1,
      p: 0.3,
      method: "normal",
    },
    relative: { estimate, low, high },
    critical: 1.96,
    df: null,
    why: null,
    beside: [],
  };
}

/** The same without a relative interval. */
export function withoutRelative(contrast: Contrast, absent: Absent["absent"] = "control-near-zero"): Contrast {
  return { ...contrast, relative: { absent } };
}

/** Nothing but the means: no interval, and why. */
export function unmeasurable(level: number, absent: Absent["absent"]): Contrast {
  const whole = contrastOf(level, [null, 0, null]);
  return {
    ...whole,
    difference: {
      ...whole.difference,
      estimate: absent === "no-units" ? null : 0,
      standardError: null,
      z: null,
      p: null,
    },
    relative: { absent },
    variant: absent === "no-units" ? { ...whole.variant, units: 0, mean: null } : whole.variant,
    why: { absent },
  };
}

export function effectOf(metric: Metric, contrast: Contrast, variant = "calendar"): Effect {
  return {
    metric: metric.name,
    role: metric.role,
    summary: metric.summary,
    variant,
    control: "list",
    contrast,
    adjusted: null,
    notAdjusted: null,
    pAdjusted: null,
    pHolm: null,
    ...placed(metric, contrast),
    power: NO_POWER,
    normality: null,
    resampled: null,
    toDraw: null,
  };
}

function armFigures(mean: number): ArmFigures {
  return { units: 50_000, mean, sd: 1, skewness: 0, kurtosis: 0, total: mean * 50_000, smallest: 0, largest: 1 };
}
