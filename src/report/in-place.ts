import { copyFileSync, existsSync, mkdirSync, renameSync, rmSync } from "node:fs";
import path from "node:path";

/** The file that says what a folder holds: it is put in place after all others. */
const LAST = "report.json";

/**
 * Moves the files of a run from where they were written into the report's folder, each by one rename, so that no file is
 * ever half the new one. If one cannot be moved, those before it are put back. A run that is killed between two renames
 * leaves files of both reports for the next run to put right: report.json is still the earlier one then.
 */
export function putInPlace(names: readonly string[], from: string, folder: string): void {
  const ordered = inOrder(names);
  const before = path.join(from, "before");
  mkdirSync(before, { recursive: true });
  const earlier = ordered.filter((name) => existsSync(path.join(folder, name)));
  for (const name of earlier) copyFileSync(path.join(folder, name), path.join(before, name));
  const moved: string[] = [];
  try {
    for (const name of ordered) {
      renameSync(path.join(from, name), path.join(folder, name));
      moved.push(name);
    }
  } catch (error) {
    for (const name of moved) {
      if (earlier.includes(name)) renameSync(path.join(before, name), path.join(folder, name));
      else rmSync(path.join(folder, name), { force: true });
    }
    throw error;
  }
}

/** By name, report.json behind all others. */
export function inOrder(names: readonly string[]): readonly string[] {
  return [...names].sort((a, b) => (a === LAST ? 1 : b === LAST ? -1 : a < b ? -1 : 1));
}
