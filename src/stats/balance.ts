import type { Arm, PowerSums } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { contrast } from "./contrast.ts";
import { normalCritical } from "./normal.ts";
import { shapedArm } from "./shaped-arm.ts";
import { tails } from "./tails.ts";
import type { ArmFigures, Difference } from "./types.ts";

/** How a quantity known before enrolment differs between the arms, where only chance should tell them apart. */
export interface Balance {
  readonly control: ArmFigures;
  readonly variant: ArmFigures;
  /** Variant minus control, in the quantity's unit, with z and p. */
  readonly difference: Difference;
  /** p of the difference, of which a doubt is in favour: see `balance`. */
  readonly p: number | null;
  /** The difference over the arms' standard deviation; null where that does not exist or is 0. */
  readonly standardised: number | null;
}

/**
 * Balance of a covariate between two arms, over the units that have it.
 *
 *   z and p as for any mean (normal; Welch's t with under 200 units in an arm); where a nominal 2.5% tail is off by more than
 *   a fifth, the larger of that p and the skew-corrected one
 *   standardised difference = (mean_t - mean_c) / sqrt((s_t^2 + s_c^2) / 2)
 * A covariate is often heavy-tailed, such as money spent before. 2,700 against 300 units, lognormal with sigma 1.5 or one in
 * ten with a value: simulated p < 0.001 in 1.4% and 1.8% of sound allocations, with the correction in 0.16% and 0.12%. It
 * takes the arms as alike, since only chance made them.
 * p asks whether the allocation was random; the standardised difference, which does not grow with the number of units,
 * whether the arms are alike enough: 0.1 is the usual mark of a difference worth a look.
 * @param alpha of the interval of the difference
 *
 * Source: Austin 2009, Statistics in Medicine 28, 3083-3107, eq. 1.
 */
export function balance(control: PowerSums, variant: PowerSums, alpha: number): Balance {
  const arms = [
    { kind: "mean", sums: control },
    { kind: "mean", sums: variant },
  ] as const;
  const critical = normalCritical(alpha);
  const found = contrast(...arms, critical);
  const corrected = isSkewed(...arms) ? contrast(...arms, critical, { alike: 1 }).difference.p : null;
  const [c, t] = [found.control.sd ?? spreadless(control), found.variant.sd ?? spreadless(variant)];
  const { estimate } = found.difference;
  const sd = c === null || t === null ? null : Math.sqrt((c ** 2 + t ** 2) / 2);
  return {
    control: found.control,
    variant: found.variant,
    difference: found.difference,
    p: corrected === null ? found.difference.p : Math.max(found.difference.p ?? 0, corrected),
    standardised: estimate === null || !sd ? null : estimate / sd,
  };
}

/** Whether a tail of the plain interval is off by more than a fifth. */
function isSkewed(control: Arm, variant: Arm): boolean {
  const [c, t] = [shapedArm(control), shapedArm(variant)];
  if (isAbsent(c) || isAbsent(t)) return false;
  const found = tails(c, t, normalCritical(NOMINAL));
  return !isAbsent(found) && found.level !== "near";
}

/** Of both tails: limits are stated for it (METHODS 3), whatever the confidence of the report. */
const NOMINAL = 0.05;

/** 0 for units that are all alike; null where the spread is not known. */
function spreadless({ n, smallest, largest }: PowerSums): number | null {
  return n >= 2 && smallest === largest ? 0 : null;
}

/**
 * Standardised difference of two shares, each unit's value 0 or 1:
 *   (p_t - p_c) / sqrt((s_t^2 + s_c^2) / 2),   s^2 = n p (1 - p) / (n - 1)
 * the same as `balance` finds from the values. Null with fewer than two units in an arm, or where neither arm varies.
 *
 * Source: Austin 2009, Statistics in Medicine 28, 3083-3107, eq. 2, with s^2 of a sample as in eq. 1.
 */
export function standardisedShares(control: Counted, variant: Counted): number | null {
  const [c, t] = [varianceOfShare(control), varianceOfShare(variant)];
  if (c === null || t === null || c + t === 0) return null;
  return (variant.units / variant.of - control.units / control.of) / Math.sqrt((c + t) / 2);
}
export interface Counted {
  readonly units: number;
  /** Of how many. */
  readonly of: number;
}

function varianceOfShare({ units, of }: Counted): number | null {
  if (of < 2) return null;
  const share = units / of;
  return (of * share * (1 - share)) / (of - 1);
}
