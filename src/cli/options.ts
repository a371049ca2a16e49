import { Option } from "commander";
import type { ReportArguments } from "./report.ts";
import { type CommandFacts, wrongArguments } from "./usage.ts";

// What all commands that read a log take.
export const THREADS = new Option("--threads <N>", "how many processor cores to use (default: all)");
export const MEMORY = new Option(
  "--memory <SIZE>",
  "how much memory the engine may use before it writes to disk, such as 4GB",
);
export const DEBUG = new Option("--debug", "on a fault of closeout itself, print where it happened");

/** As they stand in the arguments. */
export interface RawOptions {
  readonly out?: string;
  readonly previous?: string;
  readonly base?: string;
  readonly cells?: boolean;
  readonly fromCells?: string;
  readonly threads?: string;
  readonly memory?: string;
  readonly figures?: boolean;
}

/** @throws UsageError with every mistake at once */
export function readOptions(raw: RawOptions, command: CommandFacts): ReportArguments["options"] {
  const problems: string[] = [];
  if (raw.out?.trim() === "") problems.push("--out needs the name of a folder.");
  if (raw.threads !== undefined && !/^[1-9]\d{0,3}$/.test(raw.threads)) {
    problems.push(`--threads ${raw.threads}: expected a whole number, 1 or more.`);
  }
  if (raw.memory !== undefined && !/^\d+(\.\d+)?\s?[KMGT]i?B$/i.test(raw.memory)) {
    problems.push(`--memory ${raw.memory}: expected a size with its unit, such as 500MB or 4GB.`);
  }
  if (problems.length > 0) throw wrongArguments(problems.join("\n"), command);
  return {
    ...(raw.out === undefined ? {} : { out: raw.out }),
    ...(raw.fromCells === undefined ? {} : { fromCells: raw.fromCells }),
    ...(raw.previous === undefined ? {} : { previous: raw.previous }),
    ...(raw.threads === undefined ? {} : { threads: Number(raw.threads) }),
    ...(raw.memory === undefined ? {} : { memory: raw.memory }),
    ...(raw.figures === undefined ? {} : { figures: raw.figures }),
  };
}
