import type { CloseoutOptions } from "../index.ts";
import { withAccents } from "./accents.ts";
import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";

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
  const outcome = await library.closeout(plan, { ...options, progress: terminal.progress, signal });
  terminal.settle();
  if (outcome.status !== 0) {
    // A reading that was stopped can look like a log that cannot be read.
    signal.throwIfAborted();
    terminal.complain(outcome.text);
    return outcome.status;
  }
  terminal.print(withAccents(outcome.terminal, terminal));
  return 0;
}
