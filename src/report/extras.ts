import { decisionCsv } from "./decision-csv.ts";
import { figureFiles } from "./figures/files.ts";
import { fingerprintOf, shortFingerprint } from "./history.ts";
import type { Page } from "./page.ts";
import { renderPageOne } from "./render.ts";
import type { ExtraFile, ReportInputs } from "./types.ts";
import { typeset } from "./typeset.ts";

/** @param json report.json as it is written */
export function extraFiles(inputs: ReportInputs, page: Page, json: string): ExtraFile[] {
  return [
    { name: "page-one.html", text: renderPageOne(page, shortFingerprint(fingerprintOf(json))) },
    { name: "decision.csv", text: decisionCsv(inputs, json) },
    ...figureFiles(typeset(page)),
  ];
}
