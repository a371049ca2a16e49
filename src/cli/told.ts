import { withAccents } from "./accents.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";

/** Prints how a reading of the log ended: what it found, the verdict set off, or why it was refused. */
export function told(
  outcome: { readonly status: 0; readonly terminal: string } | { readonly status: 2 | 3; readonly text: string },
  terminal: Terminal,
  signal: AbortSignal,
  accented: (text: string, terminal: Terminal) => string = withAccents,
): ExitStatus {
  terminal.settle();
  if (outcome.status !== 0) {
    // A reading that was stopped can look like a log that cannot be read.
    signal.throwIfAborted();
    terminal.complain(outcome.text);
    return outcome.status;
  }
  terminal.print(accented(outcome.terminal, terminal));
  return 0;
}
