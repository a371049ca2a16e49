import type { TraceOptions } from "../index.ts";
import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";
import { told } from "./told.ts";

export interface TraceArguments {
  readonly plan: string;
  readonly unit: string;
  readonly options: Pick<TraceOptions, "threads" | "memory">;
}

export async function trace(
  { plan, unit, options }: TraceArguments,
  terminal: Terminal,
  library: Library,
  signal: AbortSignal,
): Promise<ExitStatus> {
  const outcome = await library.trace(plan, unit, { ...options, progress: terminal.progress, signal });
  return told(outcome, terminal, signal, (text) => text);
}
