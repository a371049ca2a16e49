import { type Arm, accumulated, groupSums } from "../cells/index.ts";
import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { type BandFor, bandCritical, contrast, isAbsent, normalCritical, tailLevel } from "../stats/index.ts";
import type { Pair } from "./covariates.ts";
import { partArms, type WholeArms, wholeArms } from "./group-contrasts.ts";
import type { Effect } from "./types.ts";

/** From how many units in each arm on the effect is shown as it accrued (METHODS 5). */
export const UNITS_FOR_ACCRUAL = 200;

/** One effect as units enrolled: each day's row holds all units enrolled up to it, with their whole follow-up. */
export interface Accrual {
  readonly metric: string;
  readonly variant: string;
  /** From the first day on that has enough units and no tail far off. */
  readonly days: readonly AccrualDay[];
  readonly band: BandFor & {
    /** Whether the plan says how many units were to come; else the band is made for those that came. */
    readonly isPlanned: boolean;
  };
}

export interface AccrualDay {
  /** Days since 1970-01-01, local. */
  readonly day: number;
  /** Of both arms. */
  readonly units: number;
  /** In the metric's unit, with the pointwise interval, and the band that holds on all days together. */
  readonly estimate: number | null;
  readonly low: number | null;
  readonly high: number | null;
  readonly bandLow: number | null;
  readonly bandHigh: number | null;
}

/**
 * The accrual of every effect that has one, in their order: none without time, none of quantiles.
 * @param arms per metric, per variant, both in plan order
 * @param pairs the adjusted arms of metrics that the plan adjusts
 */
export function accruals(
  plan: Plan,
  { groups }: Reduction,
  arms: readonly (readonly Arm[])[],
  pairs: readonly Pair[],
  effects: readonly Effect[],
): Accrual[] {
  return plan.metrics.flatMap((metric, m) => {
    const byDay = groups[m]?.byDay ?? null;
    if (byDay === null) return [];
    const days = accumulated(groupSums(byDay, plan.variants.length));
    const last = days.at(-1);
    if (last === undefined) return [];
    return effects
      .filter((effect) => effect.metric === metric.name)
      .map((effect) => accrual(plan, wholeArms(plan, effect, arms[m] ?? [], pairs, last), days, effect.variant));
  });
}

function accrual(plan: Plan, whole: WholeArms, days: readonly WholeArms["sums"][], variant: string): Accrual {
  const band = bandOf(plan, whole);
  const z = normalCritical(band.alpha);
  const found = days.map((day) => ({ day, two: partArms(whole, day) }));
  const first = found.findIndex(({ day, two }) => {
    if (isAbsent(two) || Math.min(...unitsOf(whole, day)) < UNITS_FOR_ACCRUAL) return false;
    const level = tailLevel(two.control, two.variant, z);
    return !isAbsent(level) && level !== "strong";
  });
  const shown = first === -1 ? [] : found.slice(first);
  return {
    metric: whole.metric.name,
    variant,
    band,
    days: shown.map(({ day, two }) => {
      const units = unitsOf(whole, day).reduce((sum, n) => sum + n, 0);
      return { day: day.group, units, ...ends(two, units, z, band) };
    }),
  };
}

/** What the band is made for: the plan's units, this contrast's share of them by allocation, else those that came. */
function bandOf({ decision, plannedUnits, variants }: Plan, whole: WholeArms): Accrual["band"] {
  const alpha = 1 - decision.confidence;
  if (plannedUnits === null) {
    return { alpha, planned: Math.max(1, sum(unitsOf(whole, whole.sums))), isPlanned: false };
  }
  const shares = variants.map(({ allocation }) => allocation);
  const own = (shares[whole.control] ?? 0) + (shares[whole.variant] ?? 0);
  return { alpha, planned: Math.max(1, (plannedUnits * own) / sum(shares)), isPlanned: true };
}

function ends(
  two: ReturnType<typeof partArms>,
  units: number,
  z: number,
  band: BandFor,
): Omit<AccrualDay, "day" | "units"> {
  if (isAbsent(two)) return { estimate: null, low: null, high: null, bandLow: null, bandHigh: null };
  const { estimate, standardError, low, high } = contrast(two.control, two.variant, z).difference;
  const half = standardError === null ? null : bandCritical(units, band) * standardError;
  const bandEnd = (sign: -1 | 1) => (estimate === null || half === null ? null : estimate + sign * half);
  return { estimate, low, high, bandLow: bandEnd(-1), bandHigh: bandEnd(1) };
}

/** Units with a value of both arms, enrolled so far. */
function unitsOf({ control, variant }: WholeArms, { arms }: WholeArms["sums"]): [number, number] {
  return [arms[control]?.value.n ?? 0, arms[variant]?.value.n ?? 0];
}

const sum = (values: readonly number[]): number => values.reduce((all, value) => all + value, 0);
