import { createHash } from "node:crypto";
import { mkdir, mkdtemp, readdir, rename, rm, rmdir, writeFile } from "node:fs/promises";
import path from "node:path";
import { decisionCsv } from "./decision-csv.ts";
import { figureFiles } from "./figures/files.ts";
import type { Page } from "./page.ts";
import { renderPageOne } from "./render.ts";
import type { ExtraFile, ReportInputs } from "./types.ts";
import { typeset } from "./typeset.ts";

const FIGURES = "figures";
/** What this file names, and nothing else that may lie in a folder called figures. */
const OURS = /^(forest|flow|(allocation|shape|sampling|choices|accrual|days|subgroup|afterwards)-\d+)\.svg$/;

/** @param json report.json as it is written */
export function extraFiles(inputs: ReportInputs, page: Page, json: string): ExtraFile[] {
  const sha256 = createHash("sha256").update(json).digest("hex");
  return [
    { name: "page-one.html", text: renderPageOne(page, `${sha256.slice(0, 4)} ${sha256.slice(4, 8)}`) },
    { name: "decision.csv", text: decisionCsv(inputs, json) },
    ...figureFiles(typeset(page)),
  ];
}

/** Puts the files into the report's folder, in place of those of an earlier run; without any, those only go. */
export async function keepExtras(folder: string, files: readonly ExtraFile[]): Promise<string[]> {
  const staging = files.length === 0 ? null : await mkdtemp(path.join(folder, ".extras-"));
  try {
    for (const { name, text } of files) {
      if (staging === null) break;
      await mkdir(path.dirname(path.join(staging, name)), { recursive: true });
      await writeFile(path.join(staging, name), text);
    }
    await removeEarlier(folder);
    for (const { name } of files) {
      if (staging === null) break;
      await mkdir(path.dirname(path.join(folder, name)), { recursive: true });
      await rename(path.join(staging, name), path.join(folder, name));
    }
    return files.map(({ name }) => path.join(folder, name));
  } finally {
    if (staging !== null) await rm(staging, { recursive: true, force: true });
  }
}

async function removeEarlier(folder: string): Promise<void> {
  for (const name of ["page-one.html", "decision.csv"]) await rm(path.join(folder, name), { force: true });
  const figures = path.join(folder, FIGURES);
  const names = await readdir(figures).catch(() => []);
  for (const name of names.filter((one) => OURS.test(one))) await rm(path.join(figures, name), { force: true });
  // left standing where something else lies in it, or it is not there
  await rmdir(figures).catch(() => undefined);
}
