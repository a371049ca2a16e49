import { readFile } from "node:fs/promises";
import path from "node:path";
import { arms } from "../../src/cells/index.ts";
import { criticalOf } from "../../src/decision/critical.ts";
import { withOrderStatistics } from "../../src/decision/index.ts";
import { type Session, withReduction } from "../../src/engine/index.ts";
import type { MetricCells, Reduction } from "../../src/engine/types.ts";
import { loadPlan, placeProblems } from "../../src/plan/index.ts";
import type { Plan } from "../../src/plan/types.ts";
import { type QuantileArm, quantileRanks } from "../../src/stats/index.ts";
import type { OracleQuantile } from "../oracle/quantile.ts";
import type { OracleMetric } from "../oracle/types.ts";

/** How the tests reach the product: here alone. */
export interface RunOptions {
  readonly threads?: number;
}

export interface EngineRun {
  readonly reduction: Reduction;
  /** One a metric, null where it is no quantile: per arm the quantile and its ends, null without units. */
  readonly quantiles: readonly OracleMetric["quantile"][];
}

/** What the engine makes of a plan file's log. */
export async function runEngine(planPath: string, options: RunOptions = {}): Promise<EngineRun> {
  const loaded = loadPlan(await readFile(planPath, "utf8"));
  const problems = "problems" in loaded ? loaded.problems : [];
  if (!("plan" in loaded)) throw new Error(placeProblems(loaded.source, planPath, problems));
  const run = await withReduction(loaded.plan, loaded.source, path.dirname(planPath), options, engineRun);
  if ("problems" in run) throw new Error(placeProblems(loaded.source, planPath, run.problems));
  return run;
}

async function engineRun(plan: Plan, reduction: Reduction, session: Session): Promise<EngineRun> {
  const bare = plan.metrics.map((metric, m) => arms(metric, cellsOf(reduction, m), plan.variants.length));
  const asked = await withOrderStatistics(plan, bare, session.atRanks);
  const quantiles = asked.map((own, m) => {
    const metric = plan.metrics[m];
    const ordered = own.filter((arm) => arm.kind === "quantile");
    if (metric === undefined || ordered.length === 0) return null;
    const none = { control: 0, variants: ordered.slice(1).map(() => 0) };
    return ordered.map((arm) => ends(arm, criticalOf(plan, metric, none)));
  });
  return { reduction, quantiles };
}

function ends({ sums, q, ordered }: QuantileArm, critical: number): OracleQuantile | null {
  if (sums.n === 0) return null;
  const ranks = quantileRanks(sums.n, q, critical);
  const at = (rank: number | null) => (rank === null ? null : (ordered.get(rank) ?? null));
  const quantile = at(ranks.at);
  if (quantile === null) throw new Error(`rank ${ranks.at} was not asked for`);
  return { at: quantile, low: at(ranks.low), high: at(ranks.high) };
}

function cellsOf({ metrics }: Reduction, m: number): MetricCells {
  const cells = metrics[m];
  if (cells === undefined) throw new Error(`no cells of metric ${m}`);
  return cells;
}

/** The parts of report.json that may not depend on the order, the files or the threads of a log, as text. */
export async function runReport(
  planPath: string,
  options: RunOptions = {},
): Promise<{ readonly effects: string; readonly flow: string; readonly checks: string }> {
  const { closeout } = await import("../../src/index.ts");
  const outcome = await closeout(planPath, { ...options, out: path.join(path.dirname(planPath), "report") });
  if (outcome.status !== 0) throw new Error(outcome.text);
  const { effects, flow, checks } = outcome.report;
  return { effects: JSON.stringify(effects), flow: JSON.stringify(flow), checks: JSON.stringify(checks) };
}
