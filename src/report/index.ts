import { effectsCsv } from "./csv.ts";
import { extraFiles } from "./extras.ts";
import { reportJson } from "./json.ts";
import { page } from "./page.ts";
import { renderPage } from "./render.ts";
import { summaryMd } from "./summary.ts";
import { terminalText } from "./terminal.ts";
import type { ReportFiles, ReportInputs } from "./types.ts";

// reruns: the report that is replaced, and where it is kept
export type { Rerun } from "./changes/changes.ts";
export type { StepJson, StepsJson } from "./changes/types.ts";
export { type ComparedReports, comparisonPage, comparisonText } from "./comparison.ts";
// the report's parts, for tests and for whoever needs one alone
export { effectsCsv } from "./csv.ts";
export type { Kept } from "./folder.ts";
export { FROM_CELLS, fingerprintOf, keptName, keptReport, REPLACES, shortFingerprint } from "./history.ts";
export { reportJson } from "./json.ts";
// what goes in and what comes out
export type { ReportJson } from "./json-types.ts";
export { firstPlanOf, type PreviousReport, previousReport, runOf } from "./previous.ts";
export { reportJsonSchema } from "./schema.ts";
export { summaryMd } from "./summary.ts";
export { terminalText } from "./terminal.ts";
export type { ReportFile, ReportFiles, ReportInputs, TerminalPaths } from "./types.ts";

/** The report's files as text, and its text for a terminal. Writes nothing: whoever calls it owns the folder. */
export async function renderReport(inputs: ReportInputs): Promise<ReportFiles> {
  const json = reportJson(inputs);
  const whole = await page(inputs, json.changes);
  const html = renderPage(whole);
  const jsonText = `${JSON.stringify(json, null, 2)}\n`;
  return {
    json,
    html,
    files: [
      { name: "report.html", text: html },
      { name: "report.json", text: jsonText },
      { name: "effects.csv", text: effectsCsv(json.effects) },
      { name: "summary.md", text: summaryMd(inputs, json.changes) },
    ],
    extras: () => extraFiles(inputs, whole, jsonText),
    terminal: (paths) => terminalText(inputs, paths, json.changes),
  };
}
