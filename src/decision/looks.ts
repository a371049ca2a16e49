import type { Reduction } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { alphaSpent, type Looks, lookCritical, pOfLooks } from "../stats/index.ts";
import { alphaOf } from "./alpha.ts";
import { analysedUnits } from "./analysed.ts";

/** Planned interim looks (METHODS 5): what they make of the critical values, and of p. */

/** The plan as this look finds it: with the share of the planned units that was analysed, where it states their number. */
export function atThisLook(plan: Plan, reduction: Reduction): Plan {
  const { looks, plannedUnits } = plan;
  if (looks === null || plannedUnits === null) return plan;
  return { ...plan, looks: { ...looks, reached: analysedUnits(reduction) / plannedUnits } };
}

/** Nearer than this share of the planned size to the look before it, a look cannot be the one that the plan meant. */
const APART = 0.01;

/**
 * The looks so far. Where the earlier ones were is not known: they are taken at their shares in the plan; where this one
 * does not lie beyond them, in proportion to its own.
 */
export function looksSoFar({ looks }: Plan): Looks | null {
  if (looks === null) return null;
  const { planned, at, spending, reached } = looks;
  const own = planned[at - 1];
  if (own === undefined) throw new Error(`look ${at} of ${planned.length} in the plan`);
  const share = Math.max(reached ?? own, APART);
  const before = planned.slice(0, at - 1);
  const isBeyond = share >= (before.at(-1) ?? 0) + APART;
  const earlier = isBeyond ? before : before.map((other) => (other / own) * share);
  return { shares: [...earlier, share], spending, isLast: at === planned.length };
}

/** The planned looks and what this one has of them. */
export interface LookAccount extends NonNullable<Plan["looks"]> {
  /** Of the planned size, at which the looks so far count; this one's is the last. */
  readonly shares: readonly number[];
  /** Of each metric that decides or must not get worse. */
  readonly metrics: readonly {
    readonly metric: string;
    /** Two-sided, of each of its intervals and all looks together. */
    readonly alpha: number;
    /** How many standard errors its intervals reach at this look. */
    readonly boundary: number;
    /** Of its alpha, by this look. */
    readonly spent: number;
  }[];
}

/** Null where the plan has no looks. */
export function lookAccount(plan: Plan): LookAccount | null {
  const soFar = looksSoFar(plan);
  if (plan.looks === null || soFar === null) return null;
  return {
    ...plan.looks,
    shares: soFar.shares,
    metrics: plan.metrics
      .filter(({ role }) => role !== "secondary")
      .map((metric) => {
        const alpha = alphaAtLooks(plan, metric);
        return { metric: metric.name, alpha, boundary: lookCritical(soFar, alpha), spent: alphaSpent(soFar, alpha) };
      }),
  };
}

/** alpha of each interval of a metric under planned looks: shared out evenly over the variants. */
export function alphaAtLooks(plan: Plan, metric: Metric): number {
  return alphaOf(plan, metric) / (plan.variants.length - 1);
}

/** All looks as planned: what a test like this one, run to its end, is judged by. */
export function looksAsPlanned({ looks }: Plan): Looks | null {
  return looks === null ? null : { shares: looks.planned, spending: looks.spending, isLast: true };
}

/** Whether this is a look before the last: one that leaves something to spend for another. */
export function isInterim({ looks }: Plan): boolean {
  if (looks === null || looks.at === looks.planned.length) return false;
  return (looks.reached ?? 0) < 1;
}

/** p of a contrast that decides, adjusted for the looks so far; as it is where the plan has none. */
export function pAtLook(plan: Plan, p: number): number {
  const looks = looksSoFar(plan);
  return looks === null ? p : pOfLooks(looks, p);
}
