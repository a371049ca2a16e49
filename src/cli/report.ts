import type { CloseoutOptions } from "../index.ts";
import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";
import { told } from "./told.ts";

export interface ReportArguments {
  readonly plan: string;
  readonly options: Pick<CloseoutOptions, "out" | "previous" | "fromCells" | "figures" | "threads" | "memory">;
}

export async function report(
  { plan, options }: ReportArguments,
  terminal: Terminal,
  library: Library,
  signal: AbortSignal,
): Promise<ExitStatus> {
  return told(await library.closeout(plan, { ...options, progress: terminal.progress, signal }), terminal, signal);
}
