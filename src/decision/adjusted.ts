import type { Metric, Plan } from "../plan/types.ts";
import { balance, isAbsent } from "../stats/index.ts";
import type { Absent, Contrast } from "../stats/types.ts";
import { type ComparedPair, comparedContrast } from "./compared.ts";
import { pOfVariants, type Variances } from "./critical.ts";
import type { Effect } from "./types.ts";
import { placed } from "./zones.ts";

/**
 * The effects of one metric with their adjusted contrasts, which then decide: zone and p are theirs. One that cannot be
 * adjusted stays as it is, with the reason.
 * @param effects one a variant, in plan order
 * @param found the adjusted arms of each; null where the plan does not adjust
 * @param variances of the levels that decide
 * @param critical of their intervals
 */
export function withAdjusted(
  plan: Plan,
  metric: Metric,
  effects: readonly Effect[],
  found: readonly (ComparedPair | Absent | null)[],
  variances: Variances,
  critical: number,
): Effect[] {
  return effects.map((effect, i) => {
    const pair = found[i] ?? null;
    if (pair === null) return effect;
    if (isAbsent(pair)) return { ...effect, notAdjusted: pair };
    return adjustedEffect(plan, metric, effect, pair, variances, critical);
  });
}

function adjustedEffect(
  plan: Plan,
  metric: Metric,
  effect: Effect,
  pair: ComparedPair,
  variances: Variances,
  critical: number,
): Effect {
  const { by, control, variant } = pair.pair;
  const own = comparedContrast(plan, pair, critical);
  const { p } = own.difference;
  return {
    ...effect,
    adjusted: {
      contrast: { ...own, beside: [...own.beside, ...scoreOf(effect.contrast)] },
      theta: by.theta,
      centre: by.centre,
      varianceReduction: by.varianceReduction,
      withoutCovariate: by.withoutCovariate,
      balance: balance(control.covariate, variant.covariate, 1 - plan.decision.confidence),
      pAdjustedOfPlain: effect.pAdjusted,
    },
    pAdjusted: metric.role === "secondary" || p === null ? null : pOfVariants(plan, metric, p, variances),
    ...placed(metric, own),
  };
}

/** With few events the score interval, which no adjustment has, stands beside. */
function scoreOf({ difference }: Contrast): Contrast["beside"] {
  const { method, low, high } = difference;
  return method === "score" && low !== null && high !== null ? [{ method, low, high }] : [];
}

/** p over the family as if the plan did not adjust, for the contrast that is shown beside. */
export function withPlainP(effects: readonly Effect[], plain: readonly Effect[]): Effect[] {
  return effects.map((effect, i) =>
    effect.adjusted === null
      ? effect
      : { ...effect, adjusted: { ...effect.adjusted, pAdjustedOfPlain: plain[i]?.pAdjusted ?? null } },
  );
}
