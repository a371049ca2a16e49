import type { VerifyOptions } from "../index.ts";
import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";

export interface VerifyArguments {
  readonly file: string;
  readonly options: Pick<VerifyOptions, "base" | "cells" | "threads" | "memory">;
}

export async function verify(
  { file, options }: VerifyArguments,
  terminal: Terminal,
  library: Library,
  signal: AbortSignal,
): Promise<ExitStatus> {
  const { status, text } = await library.verify(file, { ...options, progress: terminal.progress, signal });
  terminal.settle();
  // A reading that was stopped can look like a log that cannot be read.
  signal.throwIfAborted();
  if (status === 0 || status === 4) terminal.print(text);
  else terminal.complain(text);
  return status;
}
