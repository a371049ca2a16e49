import { readFile } from "node:fs/promises";
import path from "node:path";
import { reduce } from "../../src/engine/index.ts";
import type { Reduction } from "../../src/engine/types.ts";

import { loadPlan, placeProblems } from "../../src/plan/index.ts";

/** How the tests reach the product: here alone. */
export interface RunOptions {
  readonly threads?: number;
}

/** The engine's reduction of a plan file's log. */
export async function runEngine(planPath: string, options: RunOptions = {}): Promise<Reduction> {
  const loaded = loadPlan(await readFile(planPath, "utf8"));
  const problems = "problems" in loaded ? loaded.problems : [];
  if (!("plan" in loaded)) throw new Error(placeProblems(loaded.source, planPath, problems));
  const reduced = await reduce(loaded.plan, loaded.source, path.dirname(planPath), options);
  if ("problems" in reduced) throw new Error(placeProblems(loaded.source, planPath, reduced.problems));
  return reduced.reduction;
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
