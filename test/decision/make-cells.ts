import { arms as armsOf } from "../../src/cells/index.ts";
import type { Arm } from "../../src/cells/types.ts";
import { adjustedPairs, type Effect, effects, type Pair, withDraws } from "../../src/decision/index.ts";
import type { AdjustedRequest, MetricCells, Reduction, ScoreTable } from "../../src/engine/index.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import { cellTable, type PairUnit, pairTables, scoreTable, type Unit } from "../cells/tables.ts";
import { reductionOf } from "../checks/make.ts";

/** A whole reduction of one metric's units by hand: y, and x where the metric has a denominator or a covariate. */
export function reductionOfUnits(plan: Plan, units: readonly PairUnit[]): Reduction {
  const counts = plan.variants.map((_, v) => units.filter(([variant]) => variant === v).length);
  const reduction = reductionOf(plan, { enrolled: counts });
  return { ...reduction, metrics: reduction.metrics.map((empty, m) => cellsOf(plan.metrics[m], empty, units)) };
}

function cellsOf(metric: Metric | undefined, empty: MetricCells, units: readonly PairUnit[]): MetricCells {
  const { of, x, joint } = pairTables(units);
  if (metric?.summary === "ratio-of-totals") {
    return { ...empty, of, ratio: { per: x, score: scoreTable(scoresOf(units)), joint } };
  }
  if (metric?.adjustFor != null) return { ...empty, of, covariate: { x, joint } };
  return { ...empty, of: cellTable(units.map(([variant, bucket, y]) => [variant, bucket, y] as const)) };
}

function scoresOf(units: readonly PairUnit[]): Unit[] {
  return units.map(([variant, bucket, a, b]) => {
    const arm = units.filter(([v]) => v === variant);
    const ofB = arm.reduce((sum, [, , , x]) => sum + (x ?? 0), 0);
    const ratio = arm.reduce((sum, [, , y]) => sum + y, 0) / ofB;
    return [variant, bucket, (a - ratio * (b ?? 0)) / (ofB / arm.length)] as const;
  });
}

/** The effects of a plan with one metric, drawn too, the engine's session played by hand. */
export async function effectsOfUnits(plan: Plan, units: readonly PairUnit[]): Promise<Effect[]> {
  const reduction = reductionOfUnits(plan, units);
  const pairs = await pairsOfUnits(plan, reduction, units);
  const arms = plan.metrics.map((metric, m): Arm[] => {
    const cells = reduction.metrics[m];
    if (cells === undefined) throw new Error(`no cells for ${metric.name}`);
    return armsOf(metric, cells, plan.variants.length);
  });
  return withDraws(effects(plan, arms, reduction, pairs));
}

export function pairsOfUnits(plan: Plan, reduction: Reduction, units: readonly PairUnit[]): Promise<Pair[]> {
  const values = async (requests: readonly AdjustedRequest[]): Promise<ScoreTable[]> =>
    requests.map(({ control, variant, theta, pivots, meanFromPivot }) =>
      scoreTable(
        units
          .filter(([v]) => v === control || v === variant)
          .map(([v, bucket, y, x]) => {
            const fromMean = x === null ? 0 : x - Number(pivots[1]) - meanFromPivot;
            return [v, bucket, y - Number(pivots[0]) - theta * fromMean] as const;
          }),
      ),
    );
  return adjustedPairs(plan, reduction, values);
}
