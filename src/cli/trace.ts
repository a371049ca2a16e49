import type { TraceOptions } from "../index.ts";
import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";

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
  terminal.settle();
  if (outcome.status !== 0) {
    // A reading that was stopped can look like a log that cannot be read.
    signal.throwIfAborted();
    terminal.complain(outcome.text);
    return outcome.status;
  }
  terminal.print(outcome.terminal);
  return 0;
}
