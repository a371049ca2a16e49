/** The library entry: a plan in, a decision report out. */
import { createHash } from "node:crypto";
import { readFile } from "node:fs/promises";
import path from "node:path";
import { type Arm, arms } from "./cells/index.ts";
import { checks as soundnessChecks } from "./checks/index.ts";
import {
  accruals as accrualsOf,
  adjustedPairs,
  effects as allEffects,
  conclusion as concluded,
  contrastFigures,
  daysSince as daysSinceOf,
  otherChoices,
  type Pair,
  subgroups as subgroupsOf,
  withOrderStatistics,
} from "./decision/index.ts";
import { type Progress, type Reduction, type Session, UnusableLog, withReduction } from "./engine/index.ts";
import {
  loadPlan,
  type Plan,
  type PlanSource,
  placeProblems,
  planAfterwards,
  planJsonSchema,
  unreadablePlan,
} from "./plan/index.ts";
import { openFolder } from "./report/folder.ts";
import { type ReportFiles, type ReportJson, renderReport, reportJsonSchema } from "./report/index.ts";
import { version } from "./version.ts";

export type { Progress, ReportJson };
export { planJsonSchema, reportJsonSchema, version };

export interface CloseoutOptions {
  /** The report's folder; without it out/<experiment> in the current folder. */
  readonly out?: string | undefined;
  readonly threads?: number | undefined;
  /** As DuckDB writes sizes: "2GB". */
  readonly memory?: string | undefined;
  readonly progress?: ((progress: Progress) => void) | undefined;
  readonly signal?: AbortSignal | undefined;
}

export type Outcome =
  | {
      readonly status: 0;
      readonly report: ReportJson;
      /** The conclusion and a short table, as plain text. */
      readonly terminal: string;
      readonly folder: string;
      readonly files: readonly string[];
    }
  | { readonly status: 2 | 3; readonly text: string };

/**
 * Reads a plan and its log, and writes the report's files.
 * @returns status 2 when the plan or a file that it names is wrong, 3 when the log cannot be used; nothing is written then
 * @throws when the signal aborts, or for a fault of this program; nothing is left half written
 */
export async function closeout(planPath: string, options: CloseoutOptions = {}): Promise<Outcome> {
  let planText: string;
  try {
    planText = await readFile(planPath, "utf8");
  } catch (error) {
    return { status: 2, text: unreadablePlan(planPath, (error as NodeJS.ErrnoException).code ?? "unknown") };
  }
  const loaded = loadPlan(planText);
  const plan = "plan" in loaded ? loaded.plan : null;
  const planProblems = "problems" in loaded ? loaded.problems : [];
  const folder = plan === null ? null : await openFolder(plan.experiment, options.out);
  if (folder !== null && "refused" in folder) return { status: 2, text: folder.refused };
  try {
    const found = await withReduction(
      plan,
      loaded.source,
      path.dirname(path.resolve(planPath)),
      { ...options, rejectsTo: folder?.staged("rejects.csv") },
      measured,
    );
    if (plan === null || folder === null || "problems" in found) {
      const problems = [...planProblems, ...("problems" in found ? found.problems : [])];
      return { status: 2, text: placeProblems(loaded.source, planPath, problems) };
    }
    const further = await measuredAfterwards(plan, loaded.source, path.dirname(path.resolve(planPath)), options);
    const rendered = await decisionReport(plan, planText, found, further);
    options.signal?.throwIfAborted();
    const written = await folder.keep(rendered.files);
    const terminal = rendered.terminal({
      report: path.join(folder.shown, "report.html"),
      summary: path.join(folder.shown, "summary.md"),
    });
    return { status: 0, report: rendered.json, terminal, folder: folder.path, files: written };
  } catch (error) {
    if (!(error instanceof UnusableLog)) throw error;
    // A plan with mistakes is told of them first; the log may be meant otherwise.
    return plan === null
      ? { status: 2, text: placeProblems(loaded.source, planPath, planProblems) }
      : { status: 3, text: error.message };
  } finally {
    await folder?.discard();
  }
}

/** All that the report is made from, of constant size. */
interface Measured {
  readonly reduction: Reduction;
  /** Per metric, per variant, both in plan order. */
  readonly arms: readonly (readonly Arm[])[];
  /** The adjusted arms of metrics that the plan adjusts for a covariate. */
  readonly pairs: readonly Pair[];
}

/** The metrics that were asked afterwards, in a second reading; null where there are none. */
async function measuredAfterwards(
  plan: Plan,
  source: PlanSource,
  folder: string,
  options: CloseoutOptions,
): Promise<(Measured & { readonly plan: Plan }) | null> {
  if (plan.askedAfterwards.metrics.length === 0) return null;
  const own = planAfterwards(plan);
  const found = await withReduction(own, source, folder, options, measured);
  if ("problems" in found) throw new Error("the log has problems that it had not when it was read before");
  return { ...found, plan: own };
}

/** While the engine still holds the units: the arms, and what only the units can tell of them. */
async function measured(plan: Plan, reduction: Reduction, session: Session): Promise<Measured> {
  const arms = await withOrderStatistics(plan, armsByMetric(plan, reduction), session.atRanks);
  const pairs = await adjustedPairs(plan, reduction, session.adjusted);
  return { reduction, arms, pairs };
}

function armsByMetric(plan: Plan, { metrics }: Reduction): Arm[][] {
  return plan.metrics.map((metric, m) => {
    const cells = metrics[m];
    if (cells === undefined) throw new Error(`no cells for metric ${metric.name}`);
    return arms(metric, cells, plan.variants.length);
  });
}

/** From counts, cells and arms to the report's files; no file is read or written but the templates. */
function decisionReport(
  plan: Plan,
  planText: string,
  { reduction, arms, pairs }: Measured,
  further: (Measured & { readonly plan: Plan }) | null,
): Promise<ReportFiles> {
  const effects = allEffects(plan, arms, reduction, pairs);
  const checks = soundnessChecks(plan, reduction, effects.map(contrastFigures));
  const conclusion = concluded(plan, effects, checks, reduction, arms, pairs);
  const choices = otherChoices(plan, reduction, arms, pairs, effects);
  const accruals = accrualsOf(plan, reduction, arms, pairs, effects);
  const daysSince = daysSinceOf(plan, reduction, effects);
  const subgroups = subgroupsOf(plan, reduction, arms, pairs, effects);
  const afterwards = {
    subgroups: subgroupsOf(plan, reduction, arms, pairs, effects, "afterwards"),
    metrics:
      further === null
        ? null
        : {
            plan: further.plan,
            reduction: further.reduction,
            effects: allEffects(further.plan, further.arms, further.reduction, further.pairs),
          },
  };
  const planSha256 = createHash("sha256").update(planText).digest("hex");
  return renderReport({
    plan,
    planText,
    planSha256,
    version,
    reduction,
    checks,
    effects,
    choices,
    accruals,
    daysSince,
    subgroups,
    afterwards,
    conclusion,
  });
}
