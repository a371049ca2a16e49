import type { Arm } from "../cells/types.ts";
import type { Reduction } from "../engine/types.ts";
import type { Metric, Plan, Variant } from "../plan/types.ts";
import { contrast } from "../stats/index.ts";
import { criticalOf, pOfVariants, type Variances, variancesOf } from "./critical.ts";
import { withFamilies } from "./families.ts";
import { analysedUnits, NO_POWER, withPower } from "./power.ts";
import type { Effect } from "./types.ts";
import { placed } from "./zones.ts";

/**
 * Every metric x every variant against the control, in plan order, with its zone, its adjusted p and its power.
 *
 * What decides (primaries, guardrails) has intervals that hold for all variants at once; secondary metrics have
 * pointwise ones.
 * @param arms per metric, per variant, both in plan order
 */
export function effects(plan: Plan, arms: readonly (readonly Arm[])[], reduction: Reduction): Effect[] {
  const units = analysedUnits(reduction);
  return withFamilies(plan, contrasts(plan, arms)).map((effect) => withPower(effect, plan, units));
}

function contrasts(plan: Plan, arms: readonly (readonly Arm[])[]): Effect[] {
  const control = plan.variants.findIndex((variant) => variant.isControl);
  return plan.metrics.flatMap((metric, m) => {
    const all = plan.variants.map((_, v) => arm(arms, m, v));
    const variances = variancesOf(arm(arms, m, control), all.toSpliced(control, 1));
    return plan.variants.flatMap((variant, v) =>
      v === control ? [] : [effect(plan, metric, variant, arm(arms, m, control), arm(arms, m, v), variances)],
    );
  });
}

function effect(
  plan: Plan,
  metric: Metric,
  variant: Variant,
  control: Arm,
  treated: Arm,
  variances: Variances,
): Effect {
  const found = contrast(control, treated, criticalOf(plan, metric, variances));
  const { p } = found.difference;
  return {
    metric: metric.name,
    role: metric.role,
    summary: metric.summary,
    variant: variant.name,
    control: controlOf(plan).name,
    contrast: found,
    pAdjusted: metric.role === "secondary" || p === null ? null : pOfVariants(metric, p, variances),
    pHolm: null,
    ...placed(metric, found),
    power: NO_POWER,
  };
}

export function controlOf(plan: Plan): Variant {
  const control = plan.variants.find((variant) => variant.isControl);
  if (control === undefined) throw new Error("a plan came here without a control");
  return control;
}

/** The arm of metric m and variant v; tables of another plan are our mistake. */
export function arm(arms: readonly (readonly Arm[])[], m: number, v: number): Arm {
  const found = arms[m]?.[v];
  if (found === undefined)
    throw new Error(`no arm for metric ${m} and variant ${v}: arms came for ${arms.length} metrics`);
  return found;
}
