import type { CloseoutOptions } from "../index.ts";
import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";
import { told } from "./told.ts";

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
  return told(await library.check(plan, { ...options, progress: terminal.progress, signal }), terminal, signal);
}
