import path from "node:path";
import { isFile, logFiles } from "../engine/index.ts";
import type { PlanSource } from "../plan/index.ts";

/** How far above the report its plan's folder is looked for. */
const MOST_LEVELS = 8;

/**
 * The folder that the plan lay in: every file that the plan names is found from there. The report itself names no
 * folder, so those above it are tried, the nearest first, then the current one; null where none has all the files.
 */
export async function baseOf(source: PlanSource, reportPath: string): Promise<string | null> {
  const above: string[] = [];
  let folder = path.dirname(path.resolve(reportPath));
  while (above.length < MOST_LEVELS && !above.includes(folder)) {
    above.push(folder);
    folder = path.dirname(folder);
  }
  for (const candidate of [...above, process.cwd()]) {
    if (await hasAll(source, candidate)) return candidate;
  }
  return null;
}

async function hasAll(source: PlanSource, folder: string): Promise<boolean> {
  const { files, problems } = await logFiles(source.log, folder);
  if (files.length === 0 || problems.length > 0) return false;
  const lists = await Promise.all(source.lists.map(({ file }) => isFile(path.resolve(folder, file))));
  return lists.every((is) => is);
}
