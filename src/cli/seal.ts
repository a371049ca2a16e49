import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";

export async function seal(plan: string, terminal: Terminal, library: Library): Promise<ExitStatus> {
  const { status, text } = await library.seal(plan);
  if (status === 0) terminal.print(text);
  else terminal.complain(text);
  return status;
}
