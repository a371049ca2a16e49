import path from "node:path";
import { decisionReport } from "../compute.ts";
import { type ReduceOptions, UnusableLog } from "../engine/index.ts";
import { drawn, judged } from "../judge.ts";
import { measuredFrom, throughCells, withoutBuckets } from "../kept/file.ts";
import { cellsAt, misfit } from "../kept/from-file.ts";
import { type Measured, measure } from "../measure.ts";
import { loadPlan, type Plan, type PlanSource, placeProblems } from "../plan/index.ts";
import { keptReport, type PreviousReport, previousReport, type ReportFiles } from "../report/index.ts";
import { rerunOf } from "../steps.ts";
import { plural } from "../words/index.ts";
import { baseOf, notTheBase } from "./base.ts";
import { cellsWords } from "./cells-words.ts";
import type { Given } from "./given.ts";

export interface VerifyOptions extends ReduceOptions {
  /** The folder that the plan lay in; without it those above the report, then the current one. */
  readonly base?: string | undefined;
  /** Recompute from cells.json beside the report, without the log. */
  readonly cells?: boolean | undefined;
}

/** 0 holds; 4 does not hold; 2 something is not there; 3 the log cannot be used. */
export interface Verified {
  readonly status: 0 | 2 | 3 | 4;
  readonly text: string;
}

export interface Made {
  readonly files: ReportFiles;
  /** Said of a report that holds: what it was recomputed from, and what that leaves unproven. */
  readonly from: readonly string[];
}

/** A report's files, made anew from the plan inside it. */
export async function madeAgain(file: string, given: Given, options: VerifyOptions): Promise<Made | Verified> {
  const { planText } = given;
  const loaded = loadPlan(planText);
  if ("problems" in loaded) {
    const problems = placeProblems(loaded.source, "the plan in the report", loaded.problems);
    return { status: 4, text: `${file} does not hold: the plan inside it makes no report.\n\n${problems}` };
  }
  const previous = await previousOf(file, given);
  if (previous === undefined) {
    return {
      status: 4,
      text: `${file} cannot be shown to hold: it replaces the report with the fingerprint ${given.replaces}, and no report.json with that fingerprint is kept in history/ beside it.`,
    };
  }
  return options.cells === true
    ? fromCells(file, given, loaded.plan, previous, options)
    : fromLog(file, given, loaded.plan, loaded.source, previous, options);
}

async function fromLog(
  file: string,
  { planText, fromCells }: Given,
  plan: Plan,
  source: PlanSource,
  previous: PreviousReport | null,
  options: VerifyOptions,
): Promise<Made | Verified> {
  const wrong = options.base === undefined ? null : await notTheBase(source, options.base);
  if (wrong !== null) return { status: 2, text: wrong };
  const base = options.base ?? (await baseOf(source, file));
  if (base === null) {
    return {
      status: 2,
      text: `The log of ${file} is not found: no folder above it, nor the current one, has all the files that its plan names. Name the folder that the plan lay in with --base DIR.`,
    };
  }
  const planFolder = path.resolve(base);
  try {
    const whole = await measure(plan, source, planFolder, options);
    if ("problems" in whole) {
      return { status: 2, text: placeProblems(source, "the plan in the report", whole.problems) };
    }
    const measured = fromCells ? await throughCells(plan, planText, whole, judged(plan, whole)) : whole;
    const found = await drawn(judged(plan, measured), options);
    const now = { plan, planText, planFolder, measured, judged: found, fromCells };
    const rerun = previous === null ? null : await rerunOf(previous, now, options);
    const files = await decisionReport(plan, planText, measured, found, rerun, fromCells);
    return { files, from: logWords(measured) };
  } catch (error) {
    if (!(error instanceof UnusableLog)) throw error;
    return { status: 3, text: error.message };
  }
}

async function fromCells(
  file: string,
  given: Given,
  plan: Plan,
  previous: PreviousReport | null,
  options: VerifyOptions,
): Promise<Made | Verified> {
  const beside = path.join(path.dirname(file), "cells.json");
  const cells = await cellsAt(beside);
  if (cells === null) {
    return {
      status: 2,
      text: `${beside} is not there, or holds no cells. Without it the log is needed: leave out --cells.`,
    };
  }
  const refused = misfit(plan, given.planText, cells, beside);
  if (refused !== null) return { status: 4, text: `${file} does not hold. ${refused}` };
  const measured = await measuredFrom(plan, cells);
  const now = {
    plan,
    planText: given.planText,
    planFolder: "",
    measured,
    judged: await drawn(judged(plan, measured), options),
    fromCells: true,
  };
  const rerun = previous === null ? null : { ...(await rerunOf(previous, now, {})), steps: cells.steps };
  const files = await decisionReport(plan, given.planText, measured, now.judged, rerun, given.fromCells);
  return { files, from: cellsWords(withoutBuckets(cells), cells.steps !== null) };
}

function logWords({ reduction }: Measured): readonly string[] {
  return [
    `Recomputed from ${plural(reduction.inputs.length, "file", "files")} of the log (${plural(reduction.rowsRead, "row", "rows")}): every number, sentence and drawing is the same.`,
  ];
}

/** The report that was replaced: null for a first one, undefined where it is named and not there. */
async function previousOf(file: string, { replaces }: Given): Promise<PreviousReport | null | undefined> {
  if (replaces === null) return null;
  const folder = path.dirname(path.resolve(file));
  const json = await keptReport([folder, path.dirname(path.dirname(folder))], replaces);
  return json === null ? undefined : (previousReport(json) ?? undefined);
}
