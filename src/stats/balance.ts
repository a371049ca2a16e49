import type { PowerSums } from "../cells/types.ts";
import { contrast } from "./contrast.ts";
import { normalCritical } from "./normal.ts";
import type { ArmFigures, Difference } from "./types.ts";

/** How a quantity known before enrolment differs between the arms, where only chance should tell them apart. */
export interface Balance {
  readonly control: ArmFigures;
  readonly variant: ArmFigures;
  /** Variant minus control, in the quantity's unit, with z and p. */
  readonly difference: Difference;
  /** The difference over the arms' standard deviation; null where that does not exist or is 0. */
  readonly standardised: number | null;
}

/**
 * Balance of a covariate between two arms, over the units that have it.
 *
 *   z and p as for any mean (normal; Welch's t with under 200 units in an arm)
 *   standardised difference = (mean_t - mean_c) / sqrt((s_t^2 + s_c^2) / 2)
 * p asks whether the allocation was random; the standardised difference, which does not grow with the number of units,
 * whether the arms are alike enough: 0.1 is the usual mark of a difference worth a look.
 * @param alpha of the interval of the difference
 *
 * Source: Austin 2009, Statistics in Medicine 28, 3083-3107, eq. 1.
 */
export function balance(control: PowerSums, variant: PowerSums, alpha: number): Balance {
  const found = contrast({ kind: "mean", sums: control }, { kind: "mean", sums: variant }, normalCritical(alpha));
  const [c, t] = [found.control.sd ?? spreadless(control), found.variant.sd ?? spreadless(variant)];
  const { estimate } = found.difference;
  const sd = c === null || t === null ? null : Math.sqrt((c ** 2 + t ** 2) / 2);
  return {
    control: found.control,
    variant: found.variant,
    difference: found.difference,
    standardised: estimate === null || !sd ? null : estimate / sd,
  };
}

/** 0 for units that are all alike; null where the spread is not known. */
function spreadless({ n, smallest, largest }: PowerSums): number | null {
  return n >= 2 && smallest === largest ? 0 : null;
}
