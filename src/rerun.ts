import { readFile } from "node:fs/promises";
import { sha256 } from "./compute.ts";
import type { Reduction } from "./engine/index.ts";
import type { ReportFolder } from "./report/folder.ts";
import { type Kept, keptName, type PreviousReport, previousReport, runOf } from "./report/index.ts";
import { version } from "./version.ts";

/** The report that a new one replaces, and what of the folder is to be kept. */
export interface Replaced {
  readonly previous: PreviousReport | null;
  readonly history: readonly Kept[];
}

/**
 * Which report is replaced: the one in the folder, when its plan, its log or the program was another; when they are the
 * same, the one that it had replaced, so that a rerun of the same gives the same. Or the one that the user names.
 * @param named a path to a report.json, "none", or undefined for the one in the folder
 */
export async function replacedReport(
  folder: ReportFolder,
  named: string | undefined,
  experiment: string,
  planText: string,
  reduction: Reduction,
  fromCells: boolean,
): Promise<Replaced | { readonly refused: string }> {
  const lying = folder.earlier === null ? null : previousReport(folder.earlier);
  if (folder.earlier !== null && lying === null && named === undefined) return { refused: notComparable(folder.shown) };
  const isSame = lying !== null && sameSource(lying, planText, reduction, fromCells);
  const history = lying === null || isSame ? [] : [{ name: keptName(runOf(lying.report), lying.sha256), json: null }];
  if (named === "none") return { previous: null, history };
  if (named !== undefined) return namedReport(named, experiment, history);
  if (lying === null || !isSame) return { previous: lying, history };
  const { changes } = lying.report;
  if (changes === null) return { previous: null, history };
  const json = await folder.kept(changes.replaces);
  const previous = json === null ? null : previousReport(json);
  return previous === null ? { refused: notKept(folder.shown, changes.replaces) } : { previous, history };
}

async function namedReport(
  file: string,
  experiment: string,
  history: readonly Kept[],
): Promise<Replaced | { readonly refused: string }> {
  let json: string;
  try {
    json = await readFile(file, "utf8");
  } catch {
    return { refused: `${file}, which --previous names, cannot be read. ${NOTHING_DONE}` };
  }
  const previous = previousReport(json);
  if (previous === null) return { refused: `${file}, which --previous names, is no report.json. ${NOTHING_DONE}` };
  if (previous.report.experiment !== experiment) {
    return { refused: `${file} is the report of another experiment, "${previous.report.experiment}". ${NOTHING_DONE}` };
  }
  const name = keptName(runOf(previous.report), previous.sha256);
  return { previous, history: history.some((one) => one.name === name) ? history : [...history, { name, json }] };
}

function sameSource(
  { report: { provenance } }: PreviousReport,
  planText: string,
  reduction: Reduction,
  fromCells: boolean,
): boolean {
  const files = (of: readonly { readonly name: string; readonly sha256: string }[]) =>
    JSON.stringify(of.map(({ name, sha256 }) => [name, sha256]));
  return (
    provenance.plan.sha256 === sha256(planText) &&
    provenance.version === version &&
    provenance.fromCells === fromCells &&
    provenance.engine.version === reduction.engine.version &&
    files(provenance.inputs) === files(reduction.inputs) &&
    files(provenance.lists) === files(reduction.lists)
  );
}

const NOTHING_DONE = "No file was written.";

function notComparable(folder: string): string {
  return `The report.json in ${folder} was changed or is of another version, so that nothing can be compared with it. ${NOTHING_DONE} To start afresh: --previous none; the report there is then replaced.`;
}

function notKept(folder: string, replaced: string): string {
  return `The report in ${folder} replaced one with the fingerprint ${replaced}, which is not in its history/ any more. ${NOTHING_DONE} Name it with --previous REPORT.json, or start afresh with --previous none.`;
}
