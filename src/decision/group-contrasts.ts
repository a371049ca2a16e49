import { type Arm, type GroupSums, groupArms, groupCovariates } from "../cells/index.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { adjustedPart, armFigures, armOfLevel, isAbsent, shapedAs } from "../stats/index.ts";
import type { Absent, ArmFigures } from "../stats/types.ts";
import type { TwoArms } from "./choice-contrasts.ts";
import { type Pair, type PairArms, pairOf } from "./covariates.ts";
import { controlOf } from "./effects.ts";
import type { Effect } from "./types.ts";

/** What the contrasts of parts of an effect's units take from the whole of them. */
export interface WholeArms {
  readonly metric: Metric;
  readonly control: number;
  readonly variant: number;
  /** All units of every variant together. */
  readonly sums: GroupSums;
  /** The adjusted arms that decide; null where the effect is not adjusted. */
  readonly pair: PairArms | null;
  /** Figures of the arms that decide: the shape of scores and of adjusted values, which sums of pairs do not tell. */
  readonly figures: { readonly control: ArmFigures; readonly variant: ArmFigures };
}

/**
 * @param arms of the metric, per variant
 * @param sums all units of every variant together
 */
export function wholeArms(
  plan: Plan,
  effect: Effect,
  arms: readonly Arm[],
  pairs: readonly Pair[],
  sums: GroupSums,
): WholeArms {
  const control = plan.variants.indexOf(controlOf(plan));
  const variant = plan.variants.findIndex(({ name }) => name === effect.variant);
  const m = plan.metrics.findIndex(({ name }) => name === effect.metric);
  const metric = plan.metrics[m];
  const [c, t] = [arms[control], arms[variant]];
  if (metric === undefined || c === undefined || t === undefined)
    throw new Error(`no arms of ${effect.metric} and ${effect.variant}`);
  const found = effect.adjusted === null ? null : pairOf(pairs, m, control, variant);
  const pair = found === null || isAbsent(found) ? null : found;
  const figures =
    pair === null
      ? { control: armFigures(c), variant: armFigures(t) }
      : { control: armFigures(pair.control.arm), variant: armFigures(pair.variant.arm) };
  return { metric, control, variant, sums, pair, figures };
}

/** The arms of the effect over some of its units: by the slope of the whole where it is adjusted, a ratio by its own R. */
export function partArms(whole: WholeArms, part: GroupSums): TwoArms {
  const two = whole.pair === null ? plainArms(whole, part) : adjustedArms(whole, whole.pair, part);
  if (isAbsent(two)) return two;
  return {
    control: shapedAs(two.control, whole.figures.control),
    variant: shapedAs(two.variant, whole.figures.variant),
  };
}

function plainArms({ metric, control, variant }: WholeArms, part: GroupSums): TwoArms {
  const arms = groupArms(metric, part);
  return { control: at(arms, control), variant: at(arms, variant) };
}

function adjustedArms({ metric, control, variant, sums }: WholeArms, { by }: PairArms, part: GroupSums): TwoArms {
  const [all, own] = [groupCovariates(sums), groupCovariates(part)];
  const taken = { theta: by.theta, whole: { control: at(all, control), variant: at(all, variant) } };
  const summary = metric.summary === "proportion" ? "proportion" : "mean";
  const levels = [control, variant].map((v): Arm | Absent => {
    const level = adjustedPart(at(own, v), taken);
    if (isAbsent(level)) return level;
    return isAbsent(level.variance) ? level.variance : armOfLevel(summary, level);
  });
  const absent = levels.find((level) => "absent" in level);
  if (absent !== undefined && "absent" in absent) return absent;
  const [c, t] = levels.flatMap((level) => ("absent" in level ? [] : [level]));
  return { control: at([c], 0), variant: at([t], 0) };
}

function at<T>(all: readonly (T | undefined)[], place: number): T {
  const found = all[place];
  if (found === undefined) throw new Error(`no arm ${place} among ${all.length}`);
  return found;
}
