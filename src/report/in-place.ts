import { copyFileSync, existsSync, mkdirSync, renameSync, rmdirSync, rmSync } from "node:fs";
import path from "node:path";

/** The file that says what a folder holds: it is put in place after all others. */
const LAST = "report.json";

/**
 * Moves the files of a run from where they were written into the report's folder, each by one rename, so that no file is
 * ever half the new one, and takes away those of the earlier run that have no new one. If one cannot be moved, those before
 * it are put back. A run that is killed between two renames leaves files of both reports for the next run to put right:
 * report.json is still the earlier one then.
 * @param names of files, with the folder that they lie in: "figures/flow.svg"
 * @param gone names of the earlier run that have no place in the new one
 */
export function putInPlace(names: readonly string[], from: string, folder: string, gone: readonly string[] = []): void {
  const ordered = inOrder(names);
  const before = path.join(from, "before");
  for (const within of foldersOf([...ordered, ...gone])) mkdirSync(path.join(before, within), { recursive: true });
  const earlier = ordered.filter((name) => existsSync(path.join(folder, name)));
  for (const name of earlier) copyFileSync(path.join(folder, name), path.join(before, name));
  const taken: string[] = [];
  const moved: string[] = [];
  try {
    for (const name of gone) {
      renameSync(path.join(folder, name), path.join(before, name));
      taken.push(name);
    }
    for (const within of foldersOf(ordered)) mkdirSync(path.join(folder, within), { recursive: true });
    for (const name of ordered) {
      renameSync(path.join(from, name), path.join(folder, name));
      moved.push(name);
    }
  } catch (error) {
    for (const name of moved) {
      if (earlier.includes(name)) renameSync(path.join(before, name), path.join(folder, name));
      else rmSync(path.join(folder, name), { force: true });
    }
    for (const name of taken) renameSync(path.join(before, name), path.join(folder, name));
    removeEmpty(folder, foldersOf(ordered));
    throw error;
  }
  removeEmpty(folder, foldersOf(gone));
}

/** By name, report.json behind all others. */
export function inOrder(names: readonly string[]): readonly string[] {
  return [...names].sort((a, b) => (a === LAST ? 1 : b === LAST ? -1 : a < b ? -1 : 1));
}

/** "." for a name without one. */
function foldersOf(names: readonly string[]): string[] {
  return [...new Set(names.map((name) => path.dirname(name)))];
}

/** A folder inside the report's stays where something else lies in it. */
function removeEmpty(folder: string, within: readonly string[]): void {
  for (const name of within.filter((one) => one !== ".")) {
    try {
      rmdirSync(path.join(folder, name));
    } catch {
      // not empty, or not there
    }
  }
}
