import type { Arm } from "../cells/types.ts";
import type { MetricCells, Reduction } from "../engine/types.ts";
import type { Metric, Plan, Variant } from "../plan/types.ts";
import { isAbsent } from "../stats/index.ts";
import { withAdjusted, withPlainP } from "./adjusted.ts";
import { bucketsOf } from "./buckets.ts";
import { type Compared, comparedContrast, comparedPair } from "./compared.ts";
import { type Pair, pairOf } from "./covariates.ts";
import { criticalOf, pOfVariants, type Variances, variancesOf, variancesOfPairs } from "./critical.ts";
import { withFamilies } from "./families.ts";
import { withNormality } from "./normality.ts";
import { analysedUnits, NO_POWER, withPower } from "./power.ts";
import type { Effect } from "./types.ts";
import { placed } from "./zones.ts";

/**
 * Every metric x every variant against the control, in plan order, with its zone, its adjusted p and its power.
 *
 * What decides (primaries, guardrails) has intervals that hold for all variants at once; secondary metrics have
 * pointwise ones.
 * @param arms per metric, per variant, both in plan order
 * @param pairs the adjusted arms of metrics that the plan adjusts
 */
export function effects(
  plan: Plan,
  arms: readonly (readonly Arm[])[],
  reduction: Reduction,
  pairs: readonly Pair[] = [],
): Effect[] {
  const units = analysedUnits(reduction);
  const found = plan.metrics.map((metric, m) => contrasts(plan, metric, m, arms, pairs, cellsOf(reduction, m), units));
  const plain = withFamilies(
    plan,
    found.flatMap((metric) => metric.plain),
  );
  const deciding = withFamilies(
    plan,
    found.flatMap((metric) => metric.deciding),
  );
  return withPlainP(deciding, plain).map((effect) => withPower(effect, plan, units));
}

/** The effects of one metric, unadjusted and with what the plan adjusts for. */
function contrasts(
  plan: Plan,
  metric: Metric,
  m: number,
  arms: readonly (readonly Arm[])[],
  pairs: readonly Pair[],
  cells: MetricCells,
  units: number,
): { readonly plain: readonly Effect[]; readonly deciding: readonly Effect[] } {
  const c = indexOfControl(plan);
  const buckets = bucketsOf(metric, cells, plan.variants.length);
  const others = plan.variants.flatMap((variant, v) =>
    v === c
      ? []
      : [
          {
            variant,
            compared: { control: arm(arms, m, c), variant: arm(arms, m, v), buckets: buckets?.(c, v, false) ?? null },
            pair: comparedPair(pairOf(pairs, m, c, v), buckets, c, v),
          },
        ],
  );
  const variances = decidingVariances(plan, m, arms, []);
  const critical = criticalOf(plan, metric, variances);
  const plain = others.map(({ variant, compared }) => effect(plan, metric, variant, compared, variances, critical));
  const found = others.map(({ pair }) => pair);
  const ofPairs = metric.adjustFor === null ? variances : decidingVariances(plan, m, arms, pairs);
  const criticalOfPairs = metric.adjustFor === null ? critical : criticalOf(plan, metric, ofPairs);
  const deciding = withAdjusted(plan, metric, plain, found, ofPairs, criticalOfPairs);
  return {
    plain,
    deciding: deciding.map((effect, i) => {
      const { compared, pair } = others[i] ?? {};
      const own = effect.adjusted === null || pair == null || isAbsent(pair) ? compared : pair;
      if (own === undefined) throw new Error(`${deciding.length} effects of ${others.length} variants`);
      return withNormality(effect, plan, own, effect.adjusted === null ? critical : criticalOfPairs, units);
    }),
  };
}

function cellsOf({ metrics }: Reduction, m: number): MetricCells {
  const cells = metrics[m];
  if (cells === undefined) throw new Error(`no cells for metric ${m}, of ${metrics.length}`);
  return cells;
}

/** The variances of the levels that the contrasts of metric m compare, adjusted where there are adjusted arms. */
export function decidingVariances(
  plan: Plan,
  m: number,
  arms: readonly (readonly Arm[])[],
  pairs: readonly Pair[],
): Variances {
  const c = indexOfControl(plan);
  const control = arm(arms, m, c);
  const others = plan.variants.flatMap((_, v) =>
    v === c ? [] : [{ variant: arm(arms, m, v), pair: pairOf(pairs, m, c, v) }],
  );
  const compared = others.map(({ variant, pair }) =>
    pair === null || isAbsent(pair) ? { control, variant } : { control: pair.control.arm, variant: pair.variant.arm },
  );
  return compared.every((pair) => pair.control === control)
    ? variancesOf(
        control,
        others.map(({ variant }) => variant),
      )
    : variancesOfPairs(compared);
}

function effect(
  plan: Plan,
  metric: Metric,
  variant: Variant,
  compared: Compared,
  variances: Variances,
  critical: number,
): Effect {
  const found = comparedContrast(plan, compared, critical);
  const { p } = found.difference;
  return {
    metric: metric.name,
    role: metric.role,
    summary: metric.summary,
    variant: variant.name,
    control: controlOf(plan).name,
    contrast: found,
    pAdjusted: metric.role === "secondary" || p === null ? null : pOfVariants(plan, metric, p, variances),
    pHolm: null,
    adjusted: null,
    notAdjusted: null,
    ...placed(metric, found),
    power: NO_POWER,
    normality: null,
    resampled: null,
    toDraw: null,
  };
}

function indexOfControl(plan: Plan): number {
  return plan.variants.indexOf(controlOf(plan));
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
