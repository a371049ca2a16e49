import {
  type Arm,
  type Fraction,
  fraction,
  type GroupSums,
  groupArms,
  groupSums,
  partSums,
  scoreSums,
} from "../cells/index.ts";
import type { Reduction, SinceEnrolment } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { contrast, normalCritical } from "../stats/index.ts";
import type { Contrast } from "../stats/types.ts";
import { controlOf } from "./effects.ts";
import type { Effect } from "./types.ts";

/** One effect by day since enrolment, over the units followed to the end, unadjusted and pointwise. */
export interface DaysSince {
  readonly metric: string;
  readonly variant: string;
  readonly units: { readonly control: number; readonly variant: number };
  /** Day 0, 1, ... of follow-up, days of 24 hours. */
  readonly days: readonly Contrast[];
  /** How the difference changes from one day to the next. */
  readonly trend: Trend;
}

/** In the metric's unit for one day; null where it does not exist. */
export interface Trend {
  readonly estimate: number | null;
  readonly standardError: number | null;
  readonly low: number | null;
  readonly high: number | null;
  readonly p: number | null;
}

/**
 * The effects that can be told day by day, in their order. The days of one unit are not independent, so the trend is the
 * contrast of each unit's own slope over the days,
 *
 *   sum over d of (d - mean d) y_d / sum of (d - mean d)^2
 * of a ratio the slope of the unit's scores (a - R b) / mean(b), R and mean(b) of its arm on that day.
 */
export function daysSince(plan: Plan, { groups }: Reduction, effects: readonly Effect[]): DaysSince[] {
  return plan.metrics.flatMap((metric, m) => {
    const since = groups[m]?.sinceEnrolment ?? null;
    if (since === null) return [];
    const days = groupSums(since.groups, plan.variants.length);
    if (days.length === 0) return [];
    const slopes = slopeArms(since, days, plan.variants.length);
    return effects
      .filter((effect) => effect.metric === metric.name)
      .map((effect) => daysOf(plan, metric, effect, days, slopes));
  });
}

function daysOf(
  plan: Plan,
  metric: Metric,
  effect: Effect,
  days: readonly GroupSums[],
  slopes: readonly (Arm | null)[],
): DaysSince {
  const control = plan.variants.indexOf(controlOf(plan));
  const variant = plan.variants.findIndex(({ name }) => name === effect.variant);
  const z = normalCritical(1 - plan.decision.confidence);
  const unitsOf = (v: number) => days[0]?.arms[v]?.value.n ?? 0;
  return {
    metric: metric.name,
    variant: effect.variant,
    units: { control: unitsOf(control), variant: unitsOf(variant) },
    days: days.map((day) => {
      const arms = groupArms(metric, day);
      return contrast(at(arms, control), at(arms, variant), z);
    }),
    trend: trendOf(slopes[control] ?? null, slopes[variant] ?? null, z, days.length),
  };
}

/** The slopes came times 2 sum of (d - mean d)^2 = days (days^2 - 1) / 6, so that they were whole. */
function trendOf(control: Arm | null, variant: Arm | null, z: number, days: number): Trend {
  if (control === null || variant === null) {
    return { estimate: null, standardError: null, low: null, high: null, p: null };
  }
  const { estimate, standardError, low, high, p } = contrast(control, variant, z).difference;
  const by = (days * (days * days - 1)) / 6;
  const each = (figure: number | null) => (figure === null ? null : figure / by);
  return { estimate: each(estimate), standardError: each(standardError), low: each(low), high: each(high), p };
}

function slopeArms({ slope, scores }: SinceEnrolment, days: readonly GroupSums[], variants: number): (Arm | null)[] {
  if (slope !== null) return partSums(slope, variants).map((sums) => ({ kind: "mean", sums }));
  if (scores === null) return [];
  return scoreSums(scores, variants).map((sums, v) => {
    const mean = slopeOfRatios(days, v);
    if (mean === null || sums.n === 0) return null;
    return { kind: "adjusted", summary: "mean", mean, sums, noise: noiseOf(days, v) };
  });
}

/** sum of (2 d - (days - 1)) R_d, exact; null where an arm has no ratio on some day. */
function slopeOfRatios(days: readonly GroupSums[], v: number): Fraction | null {
  let sum: Fraction = { numerator: 0n, denominator: 1n };
  for (const [d, { arms }] of days.entries()) {
    const [a = 0n, b = 0n] = arms[v]?.joint?.totals ?? [];
    if (b === 0n) return null;
    const weight = BigInt(2 * d - (days.length - 1));
    sum = fraction(sum.numerator * b + weight * a * sum.denominator, sum.denominator * b);
  }
  return sum;
}

/**
 * How far a slope of scores can be off, for they are computed in doubles and rounded to 2^-62 of their reach (as
 * `scoreNoise`, day by day): the scales reach a and b, for both are measured against 0.
 */
function noiseOf(days: readonly GroupSums[], v: number): number {
  const ofDays = days.map(({ arms }, d) => {
    const joint = arms[v]?.joint;
    if (joint == null || joint.n === 0 || joint.totals[1] === 0n) return 0;
    const ratio = Number(joint.totals[0]) / Number(joint.totals[1]);
    const meanOfB = Number(joint.totals[1]) / 1e9 / joint.n;
    const reach = (joint.scales[0] + Math.abs(ratio) * joint.scales[1]) / Math.abs(meanOfB);
    return Math.abs(2 * d - (days.length - 1)) * reach;
  });
  return 8 * 2 ** -53 * ofDays.reduce((sum, reach) => sum + reach, 0);
}

function at(arms: readonly Arm[], place: number): Arm {
  const found = arms[place];
  if (found === undefined) throw new Error(`no arm ${place} among ${arms.length}`);
  return found;
}
