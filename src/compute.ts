import { createHash } from "node:crypto";
import { type Check, planChanged } from "./checks/index.ts";
import {
  accruals as accrualsOf,
  atThisLook,
  daysSince as daysSinceOf,
  otherChoices,
  subgroups as subgroupsOf,
} from "./decision/index.ts";
import type { Judged } from "./judge.ts";
import { cellsFile, cellsText } from "./kept/file.ts";
import type { Measured } from "./measure.ts";
import { type Plan, planChanges } from "./plan/index.ts";
import { firstPlanOf, type ReportFiles, type Rerun, renderReport } from "./report/index.ts";
import { version } from "./version.ts";

/**
 * From counts, cells and arms to the report's files; no file is read or written but the templates.
 * @param fromCells whether the figures are of cells that were kept, and the log was not read
 */
export async function decisionReport(
  planned: Plan,
  planText: string,
  measured: Measured,
  found: Judged,
  rerun: Rerun | null,
  fromCells = false,
): Promise<ReportFiles> {
  const { reduction, arms, pairs, afterwards: further } = measured;
  const { effects, conclusion } = found;
  const plan = atThisLook(planned, reduction);
  const choices = otherChoices(plan, reduction, arms, pairs, effects);
  const accruals = accrualsOf(plan, reduction, arms, pairs, effects);
  const daysSince = daysSinceOf(plan, reduction, effects);
  const subgroups = subgroupsOf(plan, reduction, arms, pairs, effects);
  const afterwards = {
    subgroups: subgroupsOf(plan, reduction, arms, pairs, effects, "afterwards"),
    metrics:
      further === null
        ? null
        : { plan: further.plan, reduction: further.measured.reduction, effects: found.afterwards },
  };
  const kept = cellsText(cellsFile(plan, planText, measured, found, rerun?.steps ?? null));
  const rendered = await renderReport({
    plan,
    planText,
    planSha256: sha256(planText),
    version,
    reduction,
    checks: [...planCheck(plan, planText, rerun), ...found.checks],
    effects,
    choices,
    accruals,
    daysSince,
    subgroups,
    afterwards,
    conclusion,
    fromCells,
    cellsSha256: sha256(kept),
    ...(rerun === null ? {} : { rerun }),
  });
  return { ...rendered, files: [...rendered.files, { name: "cells.json", text: kept }] };
}

function planCheck(plan: Plan, planText: string, rerun: Rerun | null): Check[] {
  const changes = rerun === null ? null : planChanges(firstPlanOf(rerun.previous.report).text, planText);
  const check = planChanged(plan, changes);
  return check === null ? [] : [check];
}

export function sha256(text: string): string {
  return createHash("sha256").update(text).digest("hex");
}
