import { createHash } from "node:crypto";
import { createReadStream } from "node:fs";
import { stat, symlink } from "node:fs/promises";
import path from "node:path";
import { glob, isDynamicPattern } from "tinyglobby";
import type { Plan, Problem } from "../plan/types.ts";

/** Which files an entry of `log` means, in the order of their names, and their fingerprints. */

export type Format = "csv" | "tsv" | "ndjson" | "parquet";

export interface LogFile {
  /** Index of the entry of `log`. */
  readonly source: number;
  /** Relative to the plan's folder, forward slashes. */
  readonly name: string;
  readonly path: string;
  readonly format: Format;
}

const FORMATS: readonly (readonly [RegExp, Format])[] = [
  [/\.csv(\.gz|\.zst)?$/i, "csv"],
  [/\.tsv(\.gz|\.zst)?$/i, "tsv"],
  [/\.(ndjson|jsonl)(\.gz|\.zst)?$/i, "ndjson"],
  [/\.parquet$/i, "parquet"],
];

export function formatOf(file: string): Format | null {
  return FORMATS.find(([ending]) => ending.test(file))?.[1] ?? null;
}

/** The files of every entry, each once, sorted by name. What matches nothing, or has no known ending, is a problem. */
export async function logFiles(plan: Plan, folder: string): Promise<{ files: LogFile[]; problems: Problem[] }> {
  const files: LogFile[] = [];
  const problems: Problem[] = [];
  for (const [source, entry] of plan.log.entries()) {
    const names = new Set<string>();
    for (const [j, pattern] of entry.files.entries()) {
      const where = entry.files.length === 1 ? ["log", source, "files"] : ["log", source, "files", j];
      const found = await matches(pattern, folder);
      if (found.length === 0) problems.push(noFile(where, pattern));
      for (const name of found) {
        if (formatOf(name) === null) problems.push(unknownEnding(where, name));
        else names.add(name);
      }
    }
    for (const name of [...names].sort(byCode)) {
      files.push({ source, name, path: path.resolve(folder, name), format: formatOf(name) ?? "csv" });
    }
  }
  return { files, problems };
}

/** Whether a plain path of the plan leads to a file. */
export async function isFile(file: string): Promise<boolean> {
  return stat(file).then(
    (found) => found.isFile(),
    () => false,
  );
}

/** Byte count and SHA-256 of a file, read once. */
export async function fingerprint(file: string): Promise<{ bytes: number; sha256: string }> {
  const hash = createHash("sha256");
  let bytes = 0;
  for await (const chunk of createReadStream(file, { highWaterMark: 1 << 20 })) {
    hash.update(chunk as Buffer);
    bytes += (chunk as Buffer).length;
  }
  return { bytes, sha256: hash.digest("hex") };
}

/** A path that the engine does not take for a pattern: a link in the work folder where the name holds * ? or [. */
export async function enginePath(file: string, workFolder: string, index: number): Promise<string> {
  if (!/[*?[\]]/.test(file)) return file;
  const ending = /(\.[a-z]+)(\.gz|\.zst)?$/i.exec(file)?.[0] ?? "";
  const link = path.join(workFolder, `log-${index}${ending}`);
  await symlink(file, link);
  return link;
}

async function matches(pattern: string, folder: string): Promise<string[]> {
  if (await isFile(path.resolve(folder, pattern))) return [slashes(path.relative(folder, path.resolve(folder, pattern)))];
  if (!isDynamicPattern(pattern)) return [];
  const absolute = path.isAbsolute(pattern);
  const base = absolute ? path.parse(folder).root : folder;
  const found = await glob(absolute ? slashes(path.relative(base, pattern)) : slashes(pattern), {
    cwd: base,
    onlyFiles: true,
    expandDirectories: false,
    absolute: true,
  });
  return found.map((file) => slashes(path.relative(folder, file)));
}

const noFile = (where: readonly (string | number)[], pattern: string): Problem => ({
  path: where,
  at: "value",
  message: isDynamicPattern(pattern)
    ? `No file matches ${pattern}. Patterns are read from the plan's folder.`
    : `There is no file ${pattern}. Paths are read from the plan's folder.`,
});

const unknownEnding = (where: readonly (string | number)[], name: string): Problem => ({
  path: where,
  at: "value",
  message: `The ending of ${name} says nothing about its format. Expected .csv, .tsv, .ndjson, .jsonl (also with .gz or .zst) or .parquet.`,
});

const slashes = (file: string) => file.replaceAll(path.sep, "/");
// Code units and not a locale: the order of files must be the same everywhere.
const byCode = (a: string, b: string) => (a < b ? -1 : a > b ? 1 : 0);
