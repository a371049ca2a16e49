import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";

export interface CompareArguments {
  readonly before: string;
  readonly after: string;
  /** Where the document is to be written; without it the terminal gets the text. */
  readonly out: string | undefined;
}

export async function compare(
  { before, after, out }: CompareArguments,
  terminal: Terminal,
  library: Library,
): Promise<ExitStatus> {
  const { status, text } = await library.compareReports(before, after, { out });
  if (status === 0) terminal.print(text);
  else terminal.complain(text);
  return status;
}
