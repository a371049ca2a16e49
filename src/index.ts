/** The library entry: a plan in, a decision report out. */
import path from "node:path";
import { performance } from "node:perf_hooks";
import { decisionReport } from "./compute.ts";
import type { Progress } from "./engine/index.ts";
import { drawn, judged } from "./judge.ts";
import { measuredFromFile } from "./kept/from-file.ts";
import { measure } from "./measure.ts";
import { planJsonSchema } from "./plan/index.ts";
import { openFolder } from "./report/folder.ts";
import { type ReportJson, reportJsonSchema } from "./report/index.ts";
import { replacedReport } from "./rerun.ts";
import { orRefusal, type Refusal, readPlanFile, refusal } from "./run.ts";
import { rerunOf } from "./steps.ts";
import { version } from "./version.ts";

// before the end: plan, log and soundness without any result
export { type CheckOutcome, check } from "./check.ts";
export { type Compared, compareReports } from "./compare.ts";
export type { SizeAnswer, SizeQuestion } from "./decision/index.ts";
export { type BlindJson, blindJsonSchema } from "./report/check/index.ts";
export { type Sealed, seal } from "./seal.ts";
export { size } from "./size.ts";
// one unit, row by row
export { type TraceOptions, type TraceOutcome, trace } from "./trace.ts";
export { type Verified, type VerifyOptions, verify } from "./verify/verify.ts";
export type { Progress, ReportJson };
export { planJsonSchema, reportJsonSchema, version };

export interface CloseoutOptions {
  /** The report's folder; without it out/<experiment> in the current folder. */
  readonly out?: string | undefined;
  /** The report.json of the report that this one replaces, or "none"; without it the one in the folder. */
  readonly previous?: string | undefined;
  /** The cells.json of an earlier report: its figures are taken, and the log is not read. */
  readonly fromCells?: string | undefined;
  readonly threads?: number | undefined;
  /** Writes figures/*.svg, page-one.html and decision.csv too. */
  readonly figures?: boolean | undefined;
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
  | Refusal;

/**
 * Reads a plan and its log, and writes the report's files.
 * @returns status 2 when the plan or a file that it names is wrong, 3 when the log cannot be used; nothing is written then
 * @throws when the signal aborts, or for a fault of this program; nothing is left half written
 */
export async function closeout(planPath: string, options: CloseoutOptions = {}): Promise<Outcome> {
  const file = await readPlanFile(planPath);
  if ("status" in file) return file;
  const { plan, text: planText, folder: planFolder, loaded } = file;
  const folder = plan === null ? null : await openFolder(plan.experiment, options.out);
  if (folder !== null && "refused" in folder) return { status: 2, text: folder.refused };
  try {
    return await orRefusal<Outcome>(file, async () => {
      const fromCells = options.fromCells !== undefined;
      const began = performance.now();
      const found =
        plan !== null && options.fromCells !== undefined
          ? await measuredFromFile(plan, planText, options.fromCells)
          : await measure(plan, loaded.source, planFolder, { ...options, rejectsTo: folder?.staged("rejects.csv") });
      const tookMs = performance.now() - began;
      if ("refused" in found) return { status: 2, text: found.refused };
      if ("problems" in found) return refusal(file, found.problems);
      if (plan === null || folder === null) return refusal(file);
      const replaced = await replacedReport(
        folder,
        options.previous,
        plan.experiment,
        planText,
        found.reduction,
        fromCells,
      );
      if ("refused" in replaced) return { status: 2, text: replaced.refused };
      const judgement = await drawn(judged(plan, found), options);
      const now = { plan, planText, planFolder, measured: found, judged: judgement, tookMs, fromCells };
      const rerun = replaced.previous === null ? null : await rerunOf(replaced.previous, now, options);
      const rendered = await decisionReport(plan, planText, found, judgement, rerun, fromCells);
      options.signal?.throwIfAborted();
      const extras = options.figures === true ? rendered.extras() : [];
      const written = await folder.keep([...rendered.files, ...extras], replaced.history);
      const terminal = rendered.terminal({
        report: path.join(folder.shown, "report.html"),
        summary: path.join(folder.shown, "summary.md"),
      });
      return { status: 0, report: rendered.json, terminal, folder: folder.path, files: written };
    });
  } finally {
    await folder?.discard();
  }
}
