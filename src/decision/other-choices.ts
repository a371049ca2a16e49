import { type Arm, armsWithoutLargest, type ChoiceArms, choiceArms, loggedArms } from "../cells/index.ts";
import type { MetricCells, Reduction } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { contrastBy, drawsReach, isAbsent, isNotDrawn, normalUpperTail, relativeByEnds } from "../stats/index.ts";
import { bucketsOf } from "./buckets.ts";
import { adjustedTwoArms, contrastsAsPlanned, criticalOfTwoArms, type TwoArms } from "./choice-contrasts.ts";
import { type ChoiceRow, onlyP, planRow, row } from "./choice-rows.ts";
import { type Compared, comparedPair } from "./compared.ts";
import { type Pair, pairOf } from "./covariates.ts";
import { deciding } from "./deciding.ts";
import { arm, controlOf } from "./effects.ts";
import type { Effect } from "./types.ts";

/** The contrast of a metric and a variant under every reasonable choice, the plan's own first. */
export interface Choices {
  readonly metric: string;
  readonly variant: string;
  readonly rows: readonly ChoiceRow[];
}

/**
 * Other reasonable choices (METHODS 6): the same contrast with other values, units, adjustment or method, one choice at a
 * time and all else as planned. Each takes the critical value that its own variances ask for. They share the data: how
 * many agree counts fragility, not evidence.
 * @param arms per metric, per variant, both in plan order
 * @param pairs the adjusted arms of metrics that the plan adjusts
 * @returns one an effect, in their order
 *
 * Source: Simonsohn, Simmons and Nelson 2020, Nature Human Behaviour 4, 1208-1214; ICH E9(R1), sensitivity
 * analysis.
 */
export function otherChoices(
  plan: Plan,
  { metrics }: Reduction,
  arms: readonly (readonly Arm[])[],
  pairs: readonly Pair[],
  effects: readonly Effect[],
): Choices[] {
  return plan.metrics.flatMap((metric, m) => {
    const cells = metrics[m];
    if (cells === undefined) throw new Error(`no cells for metric ${metric.name}`);
    const own = effects.filter((effect) => effect.metric === metric.name);
    const planned = plannedArms(plan, metric, m, cells, arms, pairs, own);
    const lists = [
      own.map((effect) => [planRow(effect), ...unadjusted(effect, metric)]),
      ...otherCells(plan, metric, cells, own, planned),
      byOtherMethods(plan, metric, own, planned),
      logged(plan, metric, cells, own),
    ];
    return own.map((effect, i) => ({
      metric: metric.name,
      variant: effect.variant,
      rows: lists.flatMap((list) => list[i] ?? []),
    }));
  });
}

/** Rows of one choice or several, one list an effect of the metric. */
type Rows = readonly (readonly ChoiceRow[])[];

/** The arms that the plan compares, one pair an effect; by bucket only where the plan's interval asks for that. */
function plannedArms(
  plan: Plan,
  metric: Metric,
  m: number,
  cells: MetricCells,
  arms: readonly (readonly Arm[])[],
  pairs: readonly Pair[],
  own: readonly Effect[],
): Compared[] {
  const isCorrected = plan.decision.interval === "skew-corrected";
  const buckets = isCorrected ? bucketsOf(metric, cells, plan.variants.length) : null;
  return own.map((effect) => {
    const [c, v] = places(plan, effect);
    const pair = effect.adjusted === null ? null : comparedPair(pairOf(pairs, m, c, v), buckets, c, v);
    if (pair !== null && !isAbsent(pair)) return pair;
    return { control: arm(arms, m, c), variant: arm(arms, m, v), buckets: buckets?.(c, v, false) ?? null };
  });
}

function unadjusted(effect: Effect, metric: Metric): ChoiceRow[] {
  return effect.adjusted === null ? [] : [row("unadjusted", effect.contrast, effect, metric)];
}

/** Other caps, other units, and the largest unit left out. */
function otherCells(
  plan: Plan,
  metric: Metric,
  cells: MetricCells,
  own: readonly Effect[],
  planned: readonly Compared[],
): Rows[] {
  const variants = plan.variants.length;
  const largest = armsWithoutLargest(metric, cells, variants);
  const found = metric.summary === "quantile" ? [] : choiceArms(metric, cells, variants);
  return [...found, ...(largest === null ? [] : [largest])].map((other) => {
    const contrasts = contrastsAsPlanned(
      plan,
      metric,
      own.map((effect) => twoArms(plan, metric, effect, other)),
      planned,
    );
    return own.map((effect, i) => {
      const contrast = contrasts[i] ?? null;
      return contrast === null ? [] : [row(other.choice, contrast, effect, metric)];
    });
  });
}

/** The arms of an effect under a choice, adjusted where the effect is. */
function twoArms(plan: Plan, metric: Metric, effect: Effect, { arms, covariates }: ChoiceArms): TwoArms {
  const [c, v] = places(plan, effect);
  if (effect.adjusted !== null && covariates !== null)
    return adjustedTwoArms(metric.summary === "proportion" ? "proportion" : "mean", covariates[c], covariates[v]);
  return { control: arm([arms], 0, c), variant: arm([arms], 0, v) };
}

/** The same arms by the methods that the plan's rule does not take, and by drawing and dealing their buckets. */
function byOtherMethods(plan: Plan, metric: Metric, own: readonly Effect[], planned: readonly Compared[]): Rows {
  const critical = criticalOfTwoArms(plan, metric, planned);
  return own.map((effect, i) => {
    const two = planned[i];
    if (two === undefined) return [];
    const taken = deciding(effect).difference.method;
    const plain = (["normal", "welch", "score"] as const).flatMap((method) => {
      const found = method === taken ? null : contrastBy(method, two.control, two.variant, critical);
      return found === null || found.difference.low === null ? [] : [row(method, found, effect, metric)];
    });
    const other = effect.normality?.other ?? null;
    const corrected =
      other?.difference.method === "skew-corrected" ? [row("skew-corrected", other, effect, metric)] : [];
    return [...plain, ...corrected, ...byBuckets(effect, metric, two, 2 * normalUpperTail(critical))];
  });
}

/**
 * Bootstrap-t, with a relative interval that excludes 0 when it does; of the randomisation test whether p is under alpha. Neither
 * where an early look asks for tails that the draws do not reach.
 */
function byBuckets(effect: Effect, metric: Metric, { control, variant }: Compared, alpha: number): ChoiceRow[] {
  const { resampled } = effect;
  const { difference } = deciding(effect);
  const { estimate, standardError } = difference;
  if (resampled === null || estimate === null || standardError === null) return [];
  const { bootstrap, randomisation } = resampled;
  const drawn =
    isNotDrawn(bootstrap) || !drawsReach(alpha, bootstrap.draws) ? null : { low: bootstrap.low, high: bootstrap.high };
  return [
    ...(drawn === null
      ? []
      : [
          row(
            "bootstrap-t",
            {
              difference: { ...difference, ...drawn, p: null },
              relative: relativeByEnds(control, variant, { estimate, standardError, ...drawn }),
            },
            effect,
            metric,
          ),
        ]),
    ...(isNotDrawn(randomisation) || !drawsReach(alpha, randomisation.deals)
      ? []
      : [onlyP("randomisation", estimate, randomisation.p, alpha, effect)]),
  ];
}

/** log(1 + x) is another quantity: whether there is a difference and on which side, and no more. */
function logged(plan: Plan, metric: Metric, cells: MetricCells, own: readonly Effect[]): Rows {
  const [table] = cells.choices.flatMap((found) => (found.choice === "log" ? [found.logged] : []));
  if (table === undefined) return [];
  const logs = loggedArms(table, plan.variants.length);
  const all = own.map((effect): TwoArms => {
    const [c, v] = places(plan, effect);
    return { control: arm([logs], 0, c), variant: arm([logs], 0, v) };
  });
  const alpha = 2 * normalUpperTail(criticalOfTwoArms(plan, metric, all));
  const contrasts = contrastsAsPlanned(plan, metric, all, null);
  return own.map((effect, i) => {
    const { estimate, p } = contrasts[i]?.difference ?? { estimate: null, p: null };
    return estimate === null || p === null ? [] : [onlyP("log", estimate, p, alpha, effect)];
  });
}

function places(plan: Plan, { variant }: Effect): readonly [control: number, variant: number] {
  return [plan.variants.indexOf(controlOf(plan)), plan.variants.findIndex(({ name }) => name === variant)];
}
