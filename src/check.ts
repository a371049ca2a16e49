/** The entry of `closeout check`: a plan and its log looked at before the end, without any result. */
import { createHash } from "node:crypto";
import path from "node:path";
import { blindChecks } from "./checks/index.ts";
import { type Reduction, withReduction } from "./engine/index.ts";
import type { CloseoutOptions } from "./index.ts";
import type { Plan } from "./plan/index.ts";
import { type BlindInputs, type BlindJson, CHECK_REJECTS, renderCheck } from "./report/check/index.ts";
import { openFolder } from "./report/folder.ts";
import { orRefusal, type PlanFile, type Refusal, readPlanFile, refusal } from "./run.ts";
import { version } from "./version.ts";

export type CheckOutcome =
  | {
      readonly status: 0;
      readonly check: BlindJson;
      /** The rule, how far the test is and what is wrong with the data, as plain text. */
      readonly terminal: string;
      readonly folder: string;
      readonly files: readonly string[];
    }
  | Refusal;

/**
 * Checks a plan and its log blind: nothing by variant is computed or shown that could show an effect. The log may still grow.
 * Writes check.html and check.json into the report's folder, and leaves a report there alone.
 * @returns status 2 when the plan or a file that it names is wrong, 3 when the log cannot be used; nothing is written then
 * @throws when the signal aborts, or for a fault of this program
 */
export async function check(planPath: string, options: CloseoutOptions = {}): Promise<CheckOutcome> {
  const file = await readPlanFile(planPath);
  if ("status" in file) return file;
  const folder = file.plan === null ? null : await openFolder(file.plan.experiment, options.out);
  if (folder !== null && "refused" in folder) return { status: 2, text: folder.refused };
  const toFile = { ...options, rejectsTo: folder?.staged(CHECK_REJECTS) };
  try {
    return await orRefusal<CheckOutcome>(file, async () => {
      const { loaded } = file;
      const found = await withReduction(file.plan, loaded.source, file.folder, toFile, async (plan, reduction) =>
        blindInputs(file, plan, reduction),
      );
      if ("problems" in found) return refusal(file, found.problems);
      if (folder === null) return refusal(file);
      options.signal?.throwIfAborted();
      const rendered = renderCheck(found);
      const files = await folder.keep(rendered.files);
      const terminal = rendered.terminal(path.join(folder.shown, "check.html"));
      return { status: 0, check: rendered.json, terminal, folder: folder.path, files };
    });
  } finally {
    await folder?.discard();
  }
}

/** The cells end here: past this point nothing is known of a metric by variant. */
function blindInputs(file: PlanFile, plan: Plan, reduction: Reduction): BlindInputs {
  const { metrics: _cells, groups: _groups, ...blind } = reduction;
  return {
    plan,
    planText: file.text,
    planSha256: createHash("sha256").update(file.text).digest("hex"),
    version,
    reduction: blind,
    checks: blindChecks(plan, reduction),
  };
}
