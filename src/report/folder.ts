import { mkdir, mkdtemp, readFile, rename, rm, writeFile } from "node:fs/promises";
import path from "node:path";

/**
 * The report's folder. Files are written beside it first and put in place only when all of them stand, so that a run that
 * is stopped leaves the earlier report as it was.
 */
export interface ReportFolder {
  readonly path: string;
  /** As the user named it, or as it lies from the current folder. */
  readonly shown: string;
  /** Where a file of this run is written until keep(). */
  staged(file: string): string;
  /** Writes the other files and puts all of them in place; gives their paths. */
  keep(files: readonly { readonly name: string; readonly text: string }[]): Promise<string[]>;
  /** Removes what was not kept. */
  discard(): Promise<void>;
}

/** Opens out, or out/<experiment> in the current folder. A folder with another experiment's report is refused. */
export async function openFolder(
  experiment: string,
  out?: string,
): Promise<ReportFolder | { readonly refused: string }> {
  const shown = out ?? path.join("out", folderName(experiment));
  const folder = path.resolve(shown);
  const other = await experimentIn(folder);
  if (other !== null && other !== experiment) {
    return {
      refused: `${shown} holds the report of another experiment, "${other}". Nothing was computed and no file was written. Name another folder with --out.`,
    };
  }
  await mkdir(path.dirname(folder), { recursive: true });
  const staging = await mkdtemp(path.join(path.dirname(folder), ".closeout-"));
  const names = new Set<string>();
  const staged = (file: string) => {
    names.add(file);
    return path.join(staging, file);
  };
  return {
    path: folder,
    shown,
    staged,
    keep: async (files) => {
      for (const file of files) await writeFile(staged(file.name), file.text);
      await mkdir(folder, { recursive: true });
      const all = [...names].sort();
      for (const file of all) await rename(path.join(staging, file), path.join(folder, file));
      return all.map((file) => path.join(folder, file));
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

/** The experiment of a report or a check that lies there. */
async function experimentIn(folder: string): Promise<string | null> {
  return (
    (await experimentOf(path.join(folder, "report.json"))) ?? (await experimentOf(path.join(folder, "check.json")))
  );
}

async function experimentOf(file: string): Promise<string | null> {
  try {
    const found = JSON.parse(await readFile(file, "utf8")) as { experiment?: unknown };
    return typeof found.experiment === "string" ? found.experiment : null;
  } catch {
    return null;
  }
}
