import { createHash } from "node:crypto";
import { createReadStream } from "node:fs";
import { readdir, stat, symlink } from "node:fs/promises";
import path from "node:path";
import { glob, isDynamicPattern } from "tinyglobby";
import { noSuchFile, type PlanSource, type Problem } from "../plan/index.ts";

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
export async function logFiles(
  log: PlanSource["log"],
  folder: string,
): Promise<{ files: LogFile[]; problems: Problem[] }> {
  const files: LogFile[] = [];
  const problems: Problem[] = [];
  for (const [source, entry] of log.entries()) {
    const names = new Set<string>();
    for (const [j, pattern] of entry.files.entries()) {
      const item = entry.files.length === 1 ? null : j;
      const found = await matches(pattern, folder);
      if (found.length === 0) problems.push(await noFile(source, item, pattern, folder));
      for (const name of found) {
        if (formatOf(name) === null) problems.push(unknownEnding(source, item, name));
        else names.add(name);
      }
    }
    for (const name of [...names].sort(byCode)) {
      files.push({ source, name, path: path.resolve(folder, name), format: formatOf(name) ?? "csv" });
    }
  }
  return { files, problems };
}

async function noFile(source: number, item: number | null, pattern: string, folder: string): Promise<Problem> {
  const there = await stat(path.resolve(folder, pattern)).then(
    (found) => (found.isDirectory() ? "folder" : "nothing"),
    (error: NodeJS.ErrnoException) => (error.code === "EACCES" ? "forbidden" : "nothing"),
  );
  return noSuchFile(source, item, pattern, await neighbours(pattern, folder), there);
}

/** What tells that a file was written to: its size and the moment of its last change. */
export async function states(files: readonly LogFile[]): Promise<string[]> {
  return Promise.all(files.map(({ path: file }) => stat(file).then(({ size, mtimeMs }) => `${size} ${mtimeMs}`)));
}

/** What else lies where a path leads, for a nearest name. */
export async function neighbours(pattern: string, folder: string): Promise<string[]> {
  const parent = path.dirname(pattern);
  const names = await readdir(path.resolve(folder, parent)).catch(() => []);
  return names.map((name) => slashes(path.join(parent, name)));
}

/** Whether a plain path of the plan leads to a file. */
export async function isFile(file: string): Promise<boolean> {
  return stat(file).then(
    (found) => found.isFile(),
    () => false,
  );
}

/** Byte count and SHA-256 of a file, read once; `also` is shown each piece. */
export async function fingerprint(
  file: string,
  also: (piece: Uint8Array) => void = () => {},
): Promise<{ bytes: number; sha256: string }> {
  const hash = createHash("sha256");
  let bytes = 0;
  for await (const chunk of createReadStream(file, { highWaterMark: 1 << 20 })) {
    hash.update(chunk as Buffer);
    also(chunk as Buffer);
    bytes += (chunk as Buffer).length;
  }
  return { bytes, sha256: hash.digest("hex") };
}

/**
 * A path that the engine reads as the file it is: a link in the work folder where it would take the name for a pattern,
 * or would not know how the file is packed, since it minds case there.
 */
export async function enginePath(file: string, workFolder: string, index: number): Promise<string> {
  const ending = (/(\.[a-z]+)(\.gz|\.zst)?$/i.exec(path.basename(file))?.[0] ?? "").toLowerCase();
  if (!/[*?[\]]/.test(file) && file.endsWith(ending)) return file;
  const link = path.join(workFolder, `log-${index}${ending}`);
  await symlink(file, link);
  return link;
}

async function matches(pattern: string, folder: string): Promise<string[]> {
  if (await isFile(path.resolve(folder, pattern)))
    return [slashes(path.relative(folder, path.resolve(folder, pattern)))];
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

const unknownEnding = (source: number, item: number | null, name: string): Problem => ({
  path: ["log", source, "files", ...(item === null ? [] : [item])],
  at: "value",
  message: `The ending of ${name} does not tell its format. Expected .csv, .tsv, .ndjson, .jsonl (also with .gz or .zst) or .parquet.`,
});

const slashes = (file: string) => file.replaceAll(path.sep, "/");
// Code units and not a locale: the order of files must be the same everywhere.
const byCode = (a: string, b: string) => (a < b ? -1 : a > b ? 1 : 0);
