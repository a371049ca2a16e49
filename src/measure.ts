import { type Arm, arms } from "./cells/index.ts";
import { adjustedPairs, atThisLook, type Pair, withOrderStatistics } from "./decision/index.ts";
import {
  type AdjustedRequest,
  type ReduceOptions,
  type Reduction,
  type ScoreTable,
  type Session,
  withReduction,
} from "./engine/index.ts";
import { type Plan, type PlanSource, type Problem, planAfterwards } from "./plan/index.ts";

/** All that a report is made from, of constant size. */
export interface Measured {
  readonly reduction: Reduction;
  /** Per metric, per variant, both in plan order. */
  readonly arms: readonly (readonly Arm[])[];
  /** The adjusted arms of metrics that the plan adjusts for a covariate. */
  readonly pairs: readonly Pair[];
  /** What was asked of the units beyond the reduction. */
  readonly answers: Answers;
  /** What was asked after the test began: metrics of their own, from a reading of their own. */
  readonly afterwards: { readonly plan: Plan; readonly measured: Measured } | null;
}
export interface Answers {
  readonly adjusted: readonly { readonly request: AdjustedRequest; readonly table: ScoreTable }[];
  readonly ranks: readonly {
    readonly metric: number;
    readonly variant: number;
    readonly rank: number;
    readonly value: bigint;
  }[];
}

/** One pass over the log of a plan, and another for metrics that were asked afterwards. @throws UnusableLog */
export async function measure(
  plan: Plan | null,
  source: PlanSource,
  folder: string,
  options: ReduceOptions,
): Promise<Measured | { readonly problems: readonly Problem[] }> {
  const found = await withReduction(plan, source, folder, options, whileOpen);
  if (plan === null || "problems" in found || plan.askedAfterwards.metrics.length === 0) return found;
  const own = planAfterwards(plan);
  const { rejectsTo: _none, ...again } = options;
  const further = await withReduction(own, source, folder, again, whileOpen);
  if ("problems" in further) return further;
  return { ...found, afterwards: { plan: own, measured: further } };
}

/** While the engine still holds the units: the arms, and what only the units can tell of them. */
export async function whileOpen(planned: Plan, reduction: Reduction, session: Session): Promise<Measured> {
  const plan = atThisLook(planned, reduction);
  const answers: { adjusted: Answers["adjusted"][number][]; ranks: Answers["ranks"][number][] } = {
    adjusted: [],
    ranks: [],
  };
  const atRanks: Session["atRanks"] = async (metric, variant, ranks) => {
    const values = await session.atRanks(metric, variant, ranks);
    values.forEach((value, i) => {
      answers.ranks.push({ metric, variant, rank: ranks[i] ?? 0, value });
    });
    return values;
  };
  const adjusted: Session["adjusted"] = async (requests) => {
    const tables = await session.adjusted(requests);
    tables.forEach((table, i) => {
      const request = requests[i];
      if (request !== undefined) answers.adjusted.push({ request, table });
    });
    return tables;
  };
  const arms = await withOrderStatistics(plan, armsByMetric(plan, reduction), atRanks);
  const pairs = await adjustedPairs(plan, reduction, adjusted);
  return { reduction, arms, pairs, answers, afterwards: null };
}

function armsByMetric(plan: Plan, { metrics }: Reduction): Arm[][] {
  return plan.metrics.map((metric, m) => {
    const cells = metrics[m];
    if (cells === undefined) throw new Error(`no cells for metric ${metric.name}`);
    return arms(metric, cells, plan.variants.length);
  });
}

/** What the figures of a log depend on in a plan, as text: plans with the same give the same `Measured`. */
export function measuredBy(plan: Plan): string {
  const hasQuantile = plan.metrics.some(({ summary }) => summary === "quantile");
  const { texts: _texts, plannedUnits: _units, forecast: _forecast, registered: _registered, decision, ...rest } = plan;
  const metrics = plan.metrics.map(({ worthwhile: _w, expected: _e, margin: _m, goodIs: _g, ...metric }) => metric);
  // which ranks of a quantile are asked for hangs on the confidence, which a look narrows by how far it reaches
  const asked = hasQuantile ? [decision, plan.plannedUnits] : null;
  return JSON.stringify({ ...rest, metrics, asked }, (_, value) => (typeof value === "bigint" ? String(value) : value));
}
