import type { Arm } from "../cells/types.ts";
import type { Metric, Plan, Variant } from "../plan/types.ts";
import { bonferroniP, contrast } from "../stats/index.ts";
import type { Effect } from "./types.ts";
import { placed } from "./zones.ts";

/**
 * Every metric x every variant against the control, in plan order, with its zone.
 *
 * What decides (primaries, guardrails) is held at alpha / k for k variants against one control, Bonferroni, so that all
 * their intervals hold at once; secondary metrics at alpha, pointwise. Source: Dunn 1961, JASA 56, 52-64.
 * @param arms per metric, per variant, both in plan order
 */
export function effects(plan: Plan, arms: readonly (readonly Arm[])[]): Effect[] {
  const control = plan.variants.findIndex((variant) => variant.isControl);
  return plan.metrics.flatMap((metric, m) =>
    plan.variants.flatMap((variant, v) =>
      v === control ? [] : [effect(plan, metric, variant, arm(arms, m, control), arm(arms, m, v))],
    ),
  );
}

function effect(plan: Plan, metric: Metric, variant: Variant, control: Arm, treated: Arm): Effect {
  const variants = plan.variants.length - 1;
  const decides = metric.role !== "secondary";
  const alpha = 1 - plan.decision.confidence;
  const found = contrast(control, treated, decides ? alpha / variants : alpha);
  const { p } = found.difference;
  return {
    metric: metric.name,
    role: metric.role,
    summary: metric.summary,
    variant: variant.name,
    control: controlOf(plan).name,
    contrast: found,
    pAdjusted: decides && p !== null ? bonferroniP(p, variants) : null,
    ...placed(metric, found),
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
