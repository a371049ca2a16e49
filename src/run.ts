/** What the entries that read a log have in common: the plan, its mistakes as text, and what makes a log unusable. */
import { readFile } from "node:fs/promises";
import path from "node:path";
import { UnusableLog } from "./engine/index.ts";
import { type LoadedPlan, loadPlan, type Plan, type Problem, placeProblems, unreadablePlan } from "./plan/index.ts";

/** What went wrong, in words, with its exit status: 2 the plan or a file that it names is wrong, 3 the log cannot be used. */
export interface Refusal {
  readonly status: 2 | 3;
  readonly text: string;
}

/** A plan file that could be read; the plan is null where it has mistakes. */
export interface PlanFile {
  readonly path: string;
  /** The folder that relative paths of the plan start from. */
  readonly folder: string;
  readonly text: string;
  readonly plan: Plan | null;
  readonly loaded: LoadedPlan;
}

export async function readPlanFile(planPath: string): Promise<PlanFile | Refusal> {
  let text: string;
  try {
    text = await readFile(planPath, "utf8");
  } catch (error) {
    return { status: 2, text: unreadablePlan(planPath, (error as NodeJS.ErrnoException).code ?? "unknown") };
  }
  const loaded = loadPlan(text);
  const plan = "plan" in loaded ? loaded.plan : null;
  return { path: planPath, folder: path.dirname(path.resolve(planPath)), text, plan, loaded };
}

/** The mistakes of a plan together with those that only the log could show. */
export function refusal({ path: shown, loaded }: PlanFile, found: readonly Problem[] = []): Refusal {
  const own = "problems" in loaded ? loaded.problems : [];
  return { status: 2, text: placeProblems(loaded.source, shown, [...own, ...found]) };
}

/**
 * Runs what reads the log. A log that cannot be used is a refusal; a plan with mistakes is told of them first, since the log
 * may be meant otherwise.
 */
export async function orRefusal<T>(file: PlanFile, work: () => Promise<T>): Promise<T | Refusal> {
  try {
    return await work();
  } catch (error) {
    if (!(error instanceof UnusableLog)) throw error;
    return file.plan === null ? refusal(file) : { status: 3, text: error.message };
  }
}
