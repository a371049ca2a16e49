import { stat } from "node:fs/promises";
import path from "node:path";
import { isFile, logFiles } from "../engine/index.ts";
import type { PlanSource } from "../plan/index.ts";
import { list } from "../words/index.ts";

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

/** Why a folder that was named is not the one that the plan lay in; null where every file is found from there. */
export async function notTheBase(source: PlanSource, folder: string): Promise<string | null> {
  const isFolder = await stat(folder).then(
    (found) => found.isDirectory(),
    () => false,
  );
  if (!isFolder) return `${folder}, which --base names, is no folder. Name the folder that the plan lay in.`;
  if (await hasAll(source, folder)) return null;
  const { problems } = await logFiles(source.log, folder);
  const missing = problems.map(({ path: [, entry, , item] }) => source.log[Number(entry)]?.files[Number(item ?? 0)]);
  for (const { file } of source.lists) if (!(await isFile(path.resolve(folder, file)))) missing.push(file);
  return `${folder}, which --base names, does not hold what the plan names: ${list(missing.filter((one) => one !== undefined))}. Name the folder that the plan lay in.`;
}

async function hasAll(source: PlanSource, folder: string): Promise<boolean> {
  const { files, problems } = await logFiles(source.log, folder);
  if (files.length === 0 || problems.length > 0) return false;
  const lists = await Promise.all(source.lists.map(({ file }) => isFile(path.resolve(folder, file))));
  return lists.every((is) => is);
}
