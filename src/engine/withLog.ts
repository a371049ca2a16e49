import { mkdtemp, rm } from "node:fs/promises";
import os from "node:os";
import path from "node:path";
import { logProblems, noSuchList, type Plan, type PlanSource, type Problem } from "../plan/index.ts";
import { openDuckdb } from "./duckdb.ts";
import type { Engine } from "./engine.ts";
import { isFile, neighbours } from "./files.ts";
import { type OpenLog, openLog } from "./open.ts";

export interface ReduceOptions {
  readonly threads?: number | undefined;
  readonly memory?: string | undefined;
  /** Where rejects.csv is to be written; nowhere without it. */
  readonly rejectsTo?: string | undefined;
  readonly progress?: ((progress: Progress) => void) | undefined;
  readonly signal?: AbortSignal | undefined;
}
export interface Progress {
  readonly stage: string;
  readonly rows: number;
  /** Of the whole work, roughly; null: not known. */
  readonly share: number | null;
}

/** An opened log, and the engine to read it with. */
export interface Opened {
  readonly log: OpenLog;
  readonly engine: Engine;
  /** For what is gone afterwards. */
  readonly workFolder: string;
}

/** Opens a plan's log, uses it and tidies up. @returns what `use` gives, or what is wrong between plan and log */
export async function withLog<T>(
  planned: Plan | null,
  source: PlanSource,
  folder: string,
  options: ReduceOptions,
  use: (plan: Plan, opened: Opened) => Promise<T>,
): Promise<T | { problems: readonly Problem[] }> {
  const workFolder = await mkdtemp(path.join(os.tmpdir(), "closeout-"));
  const engine = await openDuckdb({ threads: options.threads, memory: options.memory, workFolder });
  const stop = () => engine.interrupt();
  options.signal?.addEventListener("abort", stop);
  try {
    const log = await openLog(source, folder, engine, workFolder);
    const problems = [...log.problems, ...logProblems(source, log.found), ...(await missingLists(source, folder))];
    if (planned === null || problems.length > 0) return { problems };
    return await use(planned, { log, engine, workFolder });
  } finally {
    options.signal?.removeEventListener("abort", stop);
    engine.close();
    await rm(workFolder, { recursive: true, force: true });
  }
}

async function missingLists(source: PlanSource, folder: string): Promise<Problem[]> {
  const problems = await Promise.all(
    source.lists.map(async ({ filter, file }) =>
      (await isFile(path.resolve(folder, file))) ? [] : [noSuchList(filter, file, await neighbours(file, folder))],
    ),
  );
  return problems.flat();
}
