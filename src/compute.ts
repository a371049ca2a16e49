import { createHash } from "node:crypto";
import { type Arm, arms } from "./cells/index.ts";
import { type Check, planChanged, checks as soundnessChecks } from "./checks/index.ts";
import {
  accruals as accrualsOf,
  adjustedPairs,
  effects as allEffects,
  atThisLook,
  type Conclusion,
  conclusion as concluded,
  contrastFigures,
  daysSince as daysSinceOf,
  type Effect,
  otherChoices,
  type Pair,
  subgroups as subgroupsOf,
  withOrderStatistics,
} from "./decision/index.ts";
import { type ReduceOptions, type Reduction, type Session, withReduction } from "./engine/index.ts";
import type { Plan, PlanSource, Problem } from "./plan/index.ts";
import { planChanges } from "./plan/index.ts";
import { firstPlanOf, type ReportFiles, type Rerun, renderReport } from "./report/index.ts";
import { version } from "./version.ts";

/** All that a report is made from, of constant size. */
export interface Measured {
  readonly reduction: Reduction;
  /** Per metric, per variant, both in plan order. */
  readonly arms: readonly (readonly Arm[])[];
  /** The adjusted arms of metrics that the plan adjusts for a covariate. */
  readonly pairs: readonly Pair[];
}

/** One pass over the log of a plan. @throws UnusableLog */
export function measure(
  plan: Plan | null,
  source: PlanSource,
  folder: string,
  options: ReduceOptions,
): Promise<Measured | { readonly problems: readonly Problem[] }> {
  return withReduction(plan, source, folder, options, whileOpen);
}

/** While the engine still holds the units: the arms, and what only the units can tell of them. */
async function whileOpen(planned: Plan, reduction: Reduction, session: Session): Promise<Measured> {
  const plan = atThisLook(planned, reduction);
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

/** What the rule makes of the figures. */
export interface Judged {
  readonly effects: readonly Effect[];
  readonly checks: readonly Check[];
  readonly conclusion: Conclusion;
}

export function judged(planned: Plan, { reduction, arms, pairs }: Measured): Judged {
  const plan = atThisLook(planned, reduction);
  const effects = allEffects(plan, arms, reduction, pairs);
  const checks = soundnessChecks(plan, reduction, effects.map(contrastFigures));
  return { effects, checks, conclusion: concluded(plan, effects, checks, reduction, arms, pairs) };
}

/** From counts, cells and arms to the report's files; no file is read or written but the templates. */
export function decisionReport(
  planned: Plan,
  planText: string,
  measured: Measured,
  found: Judged,
  rerun: Rerun | null,
): Promise<ReportFiles> {
  const { reduction, arms, pairs } = measured;
  const { effects, conclusion } = found;
  const plan = atThisLook(planned, reduction);
  const choices = otherChoices(plan, reduction, arms, pairs, effects);
  const accruals = accrualsOf(plan, reduction, arms, pairs, effects);
  const daysSince = daysSinceOf(plan, reduction, effects);
  const subgroups = subgroupsOf(plan, reduction, arms, pairs, effects);
  const checks = [...planCheck(plan, planText, rerun), ...found.checks];
  return renderReport({
    plan,
    planText,
    planSha256: sha256(planText),
    version,
    reduction,
    checks,
    effects,
    choices,
    accruals,
    daysSince,
    subgroups,
    conclusion,
    ...(rerun === null ? {} : { rerun }),
  });
}

function planCheck(plan: Plan, planText: string, rerun: Rerun | null): Check[] {
  const changes = rerun === null ? null : planChanges(firstPlanOf(rerun.previous.report).text, planText);
  const check = planChanged(plan, changes);
  return check === null ? [] : [check];
}

export function sha256(text: string): string {
  return createHash("sha256").update(text).digest("hex");
}
