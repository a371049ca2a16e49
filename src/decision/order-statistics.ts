import type { Arm } from "../cells/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { answeredLater, type QuantileArm, quantileSearch } from "../stats/index.ts";
import { criticalOf } from "./critical.ts";

/** The values of an arm at some ranks, 1 its smallest, in the order asked and in 10^-9 of the metric's unit. */
export type ValuesAt = (metric: number, variant: number, ranks: readonly number[]) => Promise<readonly bigint[]>;

/**
 * The arms of all metrics, those of quantiles with every order statistic that a contrast of two of them asks for: with the
 * control, and with each other for the best two of several. After this nothing more is needed of the units.
 * @param arms per metric, per variant, both in plan order
 */
export async function withOrderStatistics(
  plan: Plan,
  arms: readonly (readonly Arm[])[],
  valuesAt: ValuesAt,
): Promise<(readonly Arm[])[]> {
  const all: (readonly Arm[])[] = [];
  for (const [m, own] of arms.entries()) {
    const metric = plan.metrics[m];
    const quantiles = own.filter((arm) => arm.kind === "quantile");
    if (metric === undefined) throw new Error(`arms of metric ${m}, of ${plan.metrics.length} in the plan`);
    if (quantiles.length === 0) all.push(own);
    else all.push(await ordered(plan, metric, quantiles, (variant, ranks) => valuesAt(m, variant, ranks)));
  }
  return all;
}

async function ordered(
  plan: Plan,
  metric: Metric,
  arms: readonly QuantileArm[],
  valuesAt: (variant: number, ranks: readonly number[]) => Promise<readonly bigint[]>,
): Promise<QuantileArm[]> {
  const known = arms.map((arm) => new Map(arm.ordered));
  const look = async (variant: number, ranks: readonly number[]) => {
    const values = await valuesAt(variant, ranks);
    ranks.forEach((rank, i) => {
      const value = values[i];
      if (value === undefined) throw new Error(`${values.length} values for ${ranks.length} ranks`);
      known[variant]?.set(rank, value);
    });
    return values;
  };
  const critical = criticalOf(plan, metric, withoutVariances(arms));
  for (const [a, control] of arms.entries()) {
    for (const [b, variant] of arms.entries()) {
      if (b <= a) continue;
      await answeredLater(quantileSearch(control, variant, critical), async (asked) => ({
        control: await look(a, asked.control),
        variant: await look(b, asked.variant),
      }));
    }
  }
  return arms.map((arm, v) => ({ ...arm, ordered: known[v] ?? arm.ordered }));
}

/** A quantile's critical value depends on how many variants there are, and on nothing of theirs. */
function withoutVariances(arms: readonly QuantileArm[]) {
  return { control: 0, variants: arms.slice(1).map(() => 0) };
}
