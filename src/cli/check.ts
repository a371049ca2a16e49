import type { CloseoutOptions } from "../index.ts";
import { withAccents } from "./accents.ts";
import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";

export interface CheckArguments {
  readonly plan: string;
  readonly options: Pick<CloseoutOptions, "out" | "threads" | "memory">;
}

export async function check(
  { plan, options }: CheckArguments,
  terminal: Terminal,
  library: Library,
  signal: AbortSignal,
): Promise<ExitStatus> {
  const outcome = await library.check(plan, { ...options, progress: terminal.progress, signal });
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
