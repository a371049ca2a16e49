import type { Metric, Plan } from "../plan/types.ts";
import { balance, contrast, isAbsent } from "../stats/index.ts";
import type { Contrast } from "../stats/types.ts";
import type { Pair, PairArms } from "./covariates.ts";
import { criticalOf, pOfVariants, type Variances } from "./critical.ts";
import type { Effect } from "./types.ts";
import { placed } from "./zones.ts";

/**
 * The effects of one metric with their adjusted contrasts, which then decide: zone and p are theirs. One that cannot be
 * adjusted stays as it is, with the reason.
 * @param effects one a variant, in plan order
 * @param found the adjusted arms of each; null where the plan does not adjust
 * @param variances of the levels that decide
 */
export function withAdjusted(
  plan: Plan,
  metric: Metric,
  effects: readonly Effect[],
  found: readonly (Pair["found"] | null)[],
  variances: Variances,
): Effect[] {
  return effects.map((effect, i) => {
    const pair = found[i] ?? null;
    if (pair === null) return effect;
    return isAbsent(pair) ? { ...effect, notAdjusted: pair } : adjustedEffect(plan, metric, effect, pair, variances);
  });
}

function adjustedEffect(plan: Plan, metric: Metric, effect: Effect, pair: PairArms, variances: Variances): Effect {
  const { by, control, variant } = pair;
  const own = contrast(control.arm, variant.arm, criticalOf(plan, metric, variances));
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
    pAdjusted: metric.role === "secondary" || p === null ? null : pOfVariants(metric, p, variances),
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
