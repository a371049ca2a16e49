import { driftOfLooks, type Looks, lookCritical } from "./looks.ts";
import { detectable } from "./power.ts";
import { criticalOfSimultaneous } from "./simultaneous.ts";

/** What a test to come is to show. Arms in plan order with the control first. */
export interface Ahead {
  /** Variance of one unit's value in each arm, were the effect the one supposed. */
  readonly variances: readonly [control: number, ...variants: number[]];
  /** The share of units that each arm gets; any positive numbers, as allocation gives them. */
  readonly allocation: readonly number[];
  /** As in `Question` (power.ts), above 0. */
  readonly distance: number;
  /** Two-sided, for all variants together. */
  readonly alpha: number;
  readonly power: number;
  /** Planned looks: the last boundary counts then, alpha shared out evenly over the variants. */
  readonly looks?: Looks;
}

export interface Sizing {
  /** The critical value: the normal's for one variant, Dunnett's for several, with planned looks their last boundary. */
  readonly critical: number;
  /** Whole units of each arm, the control's first. */
  readonly units: readonly number[];
  readonly total: number;
}

/**
 * Units for a test to come, arms of any allocation, variances not taken as equal.
 *
 *   N = max over variants i of ((c + z(power)) / distance)^2 (s_c^2 / a_c + s_i^2 / a_i),   a the shares of units
 * rounded up in each arm. Normal throughout, as the analysis of large arms is; under 200 units an arm Welch's t asks for
 * about one unit more in each. With planned looks the standard errors that one of them shows with this power take the place
 * of c + z(power) (`driftOfLooks`): the whole size, which only a test that goes to its last look needs.
 *
 * Source: Chow, Shao and Wang 2008, Sample Size Calculations in Clinical Research, 2nd ed., 3.2.1 (means) and 4.2.1
 * (proportions, unpooled).
 */
export function sizing({ variances, allocation, distance, alpha, power, looks }: Ahead): Sizing {
  if (allocation.length !== variances.length)
    throw new Error(`${allocation.length} shares for ${variances.length} arms`);
  const whole = allocation.reduce((sum, share) => sum + share, 0);
  const shares = allocation.map((share) => share / whole);
  const [control = 0, ...variants] = variances.map((variance, arm) => variance / (shares[arm] ?? 0));
  const own = alpha / variants.length;
  const critical = looks === undefined ? criticalOfSimultaneous(control, variants, alpha) : lookCritical(looks, own);
  const errors = looks === undefined ? detectable(critical, power, 1) : driftOfLooks(looks, own, power);
  const needed = Math.max(...variants.map((variant) => (errors / distance) ** 2 * (control + variant)));
  // One unit alone has no spread to be judged by.
  const units = shares.map((share) => Math.max(2, Math.ceil(needed * share)));
  return { critical, units, total: units.reduce((sum, n) => sum + n, 0) };
}

/** The variance of one unit's value in each arm of a metric that is a mean: the control's sd squared, in all arms alike. */
export function meanVariances(sd: number, variants: number): Ahead["variances"] {
  return [sd ** 2, ...Array<number>(variants).fill(sd ** 2)];
}

/**
 * The variance of one unit's value in each arm of a metric that is a proportion, p (1 - p): unpooled, as the analysis.
 * @param control the control's share
 * @param effect the difference supposed in each variant, with its sign; 0 for a guardrail. The share with it stays in [0, 1]
 */
export function shareVariances(control: number, effect: number, variants: number): Ahead["variances"] {
  const variant = control + effect;
  if (!(variant >= 0 && variant <= 1)) throw new Error(`a share of ${control} cannot move by ${effect}`);
  return [control * (1 - control), ...Array<number>(variants).fill(variant * (1 - variant))];
}

/** Whole days until so many units are enrolled, each day as many. */
export function enrolmentDays(total: number, unitsADay: number): number {
  return Math.ceil(total / unitsADay);
}
