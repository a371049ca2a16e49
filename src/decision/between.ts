import type { Arm } from "../cells/types.ts";
import type { Reduction } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { isAbsent } from "../stats/index.ts";
import { bucketsOf } from "./buckets.ts";
import { comparedContrast } from "./compared.ts";
import { type Pair, pairOf } from "./covariates.ts";
import { criticalOf } from "./critical.ts";
import { arm, decidingVariances } from "./effects.ts";
import { levelsInWords } from "./levels.ts";
import { NO_POWER } from "./power.ts";
import { told } from "./told.ts";
import type { Effect } from "./types.ts";

/**
 * The contrast between the best two of several variants that passed, on one metric, at the critical value that decides: the
 * rule took the larger estimate, and this tells how sure the order of the two is. Adjusted where the plan adjusts.
 */
export function betweenSentence(
  plan: Plan,
  metric: Metric,
  reduction: Reduction,
  arms: readonly (readonly Arm[])[],
  pairs: readonly Pair[],
  best: string,
  other: string,
): string {
  const m = plan.metrics.indexOf(metric);
  const index = (name: string) => plan.variants.findIndex((variant) => variant.name === name);
  const pair = pairOf(pairs, m, index(other), index(best));
  const isAdjusted = pair !== null && !isAbsent(pair);
  const critical = criticalOf(plan, metric, decidingVariances(plan, m, arms, isAdjusted ? pairs : []));
  const cells = reduction.metrics[m];
  const buckets = cells === undefined ? null : bucketsOf(metric, cells, plan.variants.length);
  const [control, variant] = isAdjusted
    ? [pair.control.arm, pair.variant.arm]
    : [arm(arms, m, index(other)), arm(arms, m, index(best))];
  const own = buckets?.(index(other), index(best), isAdjusted) ?? null;
  const found = comparedContrast(plan, { control, variant, buckets: own }, critical);
  const effect: Effect = {
    metric: metric.name,
    role: "secondary",
    summary: metric.summary,
    variant: best,
    control: other,
    contrast: found,
    adjusted: null,
    notAdjusted: null,
    pAdjusted: null,
    pHolm: null,
    zone: "not-settled",
    eitherWay: false,
    power: NO_POWER,
    normality: null,
    resampled: null,
    toDraw: null,
  };
  const texts = told(effect, plan);
  const levels = levelsInWords(effect, plan);
  const start = `Between the two, ${metric.name}`;
  if (texts === null || levels === null) return `${start} cannot be compared.`;
  return `${start}: ${levels}, ${texts.found}. This comparison does not decide.`;
}
