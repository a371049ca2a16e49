import { renameSync } from "node:fs";
import { copyFile, mkdir, mkdtemp, readdir, readFile, rm, stat, writeFile } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import { lyingExtras } from "./extra-names.ts";
import { HISTORY, keptReport } from "./history.ts";
import { putInPlace } from "./in-place.ts";

/**
 * The report's folder. Files are written beside it first and put in place only when all of them stand, so that a run that
 * is stopped leaves the earlier report as it was.
 */
export interface ReportFolder {
  readonly path: string;
  /** As the user named it, or as it lies from the current folder. */
  readonly shown: string;
  /** The report.json that lies there, as text; null where no report does. */
  readonly earlier: string | null;
  /** The report.json of an earlier run, kept in history/, by its fingerprint. */
  kept(sha256: string): Promise<string | null>;
  /** Where a file of this run is written until keep(). */
  staged(file: string): string;
  /**
   * Writes the other files and puts all of them in place, what is to be kept into history/ first; gives the files' paths.
   * What an earlier `--figures` left belongs to its report.json, and goes with it.
   */
  keep(files: readonly Written[], history?: readonly Kept[]): Promise<string[]>;
  /** Removes what was not kept. */
  discard(): Promise<void>;
}

interface Written {
  readonly name: string;
  readonly text: string;
}

/** A report for history/: the one that lies in the folder, or only the report.json that was named. */
export interface Kept {
  readonly name: string;
  readonly json: string | null;
}

/** What of a report is kept: all but rejects.csv, which may hold personal data and follows from the log. */
const KEPT_FILES = ["report.html", "report.json", "summary.md", "effects.csv", "cells.json"];

/** Opens out, or out/<experiment> in the current folder. A folder with another experiment's report is refused. */
export async function openFolder(
  experiment: string,
  out?: string,
): Promise<ReportFolder | { readonly refused: string }> {
  const shown = out ?? path.join("out", folderName(experiment));
  const folder = path.resolve(shown);
  const lying = await lyingIn(path.join(folder, "report.json"));
  const owner = lying ?? (await lyingIn(path.join(folder, "check.json")));
  if (owner !== null && owner.experiment !== experiment) {
    return {
      refused: `${shown} holds the report of another experiment, "${owner.experiment}". Nothing was computed and no file was written. Name another folder with --out.`,
    };
  }
  await mkdir(path.dirname(folder), { recursive: true });
  await removeLeftBehind(path.dirname(folder));
  const staging = await mkdtemp(path.join(path.dirname(folder), `${stagingPrefix()}${process.pid}-`));
  const names = new Set<string>();
  const staged = (file: string) => {
    names.add(file);
    return path.join(staging, file);
  };
  return {
    path: folder,
    shown,
    earlier: lying?.text ?? null,
    kept: (sha256) => keptReport([folder], sha256),
    staged,
    keep: async (files, history = []) => {
      const extras = await lyingExtras(folder);
      for (const file of files) await write(staged(file.name), file.text);
      for (const one of history) await stageKept(one, folder, extras, path.join(staging, HISTORY, one.name));
      await mkdir(history.length > 0 ? path.join(folder, HISTORY) : folder, { recursive: true });
      const missing = [];
      for (const { name } of history) if (!(await isThere(path.join(folder, HISTORY, name)))) missing.push(name);
      // From here on nothing waits: no signal can come between.
      for (const name of missing) renameSync(path.join(staging, HISTORY, name), path.join(folder, HISTORY, name));
      const isAnother = files.some(({ name, text }) => name === "report.json" && text !== lying?.text);
      const gone = isAnother ? extras.filter((name) => !names.has(name)) : [];
      putInPlace([...names], staging, folder, gone);
      return [...names].sort().map((file) => path.join(folder, file));
    },
    discard: () => rm(staging, { recursive: true, force: true }),
  };
}

/** Lower case, each run of characters other than a-z and 0-9 one "-", none at either end, at most 60. */
export function folderName(experiment: string): string {
  const name = experiment
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, "-")
    .replace(/^-+/, "")
    .slice(0, 60)
    .replace(/-+$/, "");
  return name === "" ? "experiment" : name;
}

async function lyingIn(file: string): Promise<{ readonly experiment: string; readonly text: string } | null> {
  try {
    const text = await readFile(file, "utf8");
    const { experiment } = JSON.parse(text) as { experiment?: unknown };
    return typeof experiment === "string" ? { experiment, text } : null;
  } catch {
    return null;
  }
}

async function stageKept({ json }: Kept, folder: string, extras: readonly string[], into: string): Promise<void> {
  if (json !== null) return write(path.join(into, "report.json"), json);
  for (const file of [...KEPT_FILES, ...extras]) {
    if (!(await isThere(path.join(folder, file)))) continue;
    await mkdir(path.dirname(path.join(into, file)), { recursive: true });
    await copyFile(path.join(folder, file), path.join(into, file));
  }
}

async function write(file: string, text: string): Promise<void> {
  await mkdir(path.dirname(file), { recursive: true });
  await writeFile(file, text);
}

function isThere(file: string): Promise<boolean> {
  return stat(file).then(
    () => true,
    () => false,
  );
}

/** With the machine's name: the number of a process says something on its own machine only. */
const stagingPrefix = () => `.closeout-${os.hostname().replace(/[^A-Za-z0-9]+/g, "_")}-`;

/** What a run of this machine that was killed has left beside the folder. */
async function removeLeftBehind(parent: string): Promise<void> {
  const prefix = stagingPrefix();
  for (const name of await readdir(parent)) {
    const [, process = ""] = name.startsWith(prefix) ? (/^(\d+)-/.exec(name.slice(prefix.length)) ?? []) : [];
    if (process !== "" && !isRunning(Number(process))) {
      await rm(path.join(parent, name), { recursive: true, force: true }).catch(() => undefined);
    }
  }
}

function isRunning(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return (error as NodeJS.ErrnoException).code !== "ESRCH";
  }
}
