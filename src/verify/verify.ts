import { readFile, stat } from "node:fs/promises";
import path from "node:path";
import { decisionReport, judged, measure } from "../compute.ts";
import { type ReduceOptions, UnusableLog } from "../engine/index.ts";
import { loadPlan, placeProblems } from "../plan/index.ts";
import { keptReport, type PreviousReport, previousReport, type ReportFiles } from "../report/index.ts";
import { rerunOf } from "../steps.ts";
import { version } from "../version.ts";
import { count, plural } from "../words/index.ts";
import { baseOf } from "./base.ts";
import { filesBeside, sameText } from "./beside.ts";
import { differences } from "./differences.ts";
import { type Given, givenIn } from "./given.ts";
import { differenceLines } from "./words.ts";

export interface VerifyOptions extends ReduceOptions {
  /** The folder that the plan lay in; without it those above the report, then the current one. */
  readonly base?: string | undefined;
}

/** 0 holds; 4 does not hold; 2 something is not there; 3 the log cannot be used. */
export interface Verified {
  readonly status: 0 | 2 | 3 | 4;
  readonly text: string;
}

/**
 * Makes a report anew from the plan inside it and the log, and compares page with page: whatever was changed by hand, in
 * the report or in the log, shows as a difference.
 */
export async function verify(reportPath: string, options: VerifyOptions = {}): Promise<Verified> {
  const file = (await isFolder(reportPath)) ? path.join(reportPath, "report.html") : reportPath;
  const html = await readFile(file, "utf8").catch(() => null);
  if (html === null) return { status: 2, text: `${file} cannot be read. Name the report.html that is to be verified.` };
  const given = givenIn(html);
  if (given === null) {
    return {
      status: 2,
      text: `${file} is no report of closeout, or the plan was taken out of it. Nothing can be verified.`,
    };
  }
  const made = await madeAgain(file, given, options);
  if ("status" in made) return made;
  const found = differences(html, made.files.html);
  const beside = await filesBeside(file, made.files.files);
  if (found.length + beside.lines.length > 0) {
    return {
      status: 4,
      text: [
        `${file} does not hold: ${plural(found.length + beside.lines.length, "difference", "differences")}.`,
        ...otherVersion(given),
        ...differenceLines(found),
        ...beside.lines,
      ].join("\n"),
    };
  }
  return {
    status: 0,
    text: [
      `${file} holds.`,
      `Recomputed from ${plural(made.filesRead, "file", "files")} of the log (${count(made.files.json.flow.rowsRead)} rows): every number, sentence and drawing is the same.`,
      sameText(beside),
    ]
      .filter((line) => line !== "")
      .join("\n"),
  };
}

interface Made {
  readonly files: ReportFiles;
  readonly filesRead: number;
}

async function madeAgain(file: string, given: Given, options: VerifyOptions): Promise<Made | Verified> {
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
  const base = options.base ?? (await baseOf(loaded.source, file));
  if (base === null) {
    return {
      status: 2,
      text: `The log of ${file} is not found: no folder above it, nor the current one, has all the files that its plan names. Name the folder that the plan lay in with --base DIR.`,
    };
  }
  try {
    const measured = await measure(loaded.plan, loaded.source, path.resolve(base), options);
    if ("problems" in measured) {
      return { status: 2, text: placeProblems(loaded.source, "the plan in the report", measured.problems) };
    }
    const found = judged(loaded.plan, measured);
    const now = { plan: loaded.plan, planText, planFolder: path.resolve(base), measured, judged: found };
    const rerun = previous === null ? null : await rerunOf(previous, now, options);
    const files = await decisionReport(loaded.plan, planText, measured, found, rerun);
    return { files, filesRead: measured.reduction.inputs.length };
  } catch (error) {
    if (!(error instanceof UnusableLog)) throw error;
    return { status: 3, text: error.message };
  }
}

/** The report that was replaced: null for a first one, undefined where it is named and not there. */
async function previousOf(file: string, { replaces }: Given): Promise<PreviousReport | null | undefined> {
  if (replaces === null) return null;
  const folder = path.dirname(path.resolve(file));
  const json = await keptReport([folder, path.dirname(path.dirname(folder))], replaces);
  return json === null ? undefined : (previousReport(json) ?? undefined);
}

function otherVersion(given: Given): string[] {
  if (given.version === null || given.version === version) return [];
  return [
    `It was made by closeout ${given.version} and this is ${version}: what follows may come of that alone. Verify it with ${given.version}.`,
  ];
}

function isFolder(file: string): Promise<boolean> {
  return stat(file).then(
    (found) => found.isDirectory(),
    () => false,
  );
}
