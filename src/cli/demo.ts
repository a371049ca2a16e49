import { join } from "node:path";
import { type DemoProblem, writeDemo } from "./demo/write.ts";
import type { Library } from "./library.ts";
import { report } from "./report.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";

/** Writes the demo's plan and log into the folder, then its report into the folder's `report/`. */
export async function demo(
  folder: string,
  terminal: Terminal,
  library: Library,
  signal: AbortSignal,
): Promise<ExitStatus> {
  terminal.progress({ stage: "writing the demo's log", rows: 0, share: null });
  const written = await writeDemo(folder, signal);
  terminal.settle();
  if ("found" in written) {
    terminal.complain(problemText(written));
    return 2;
  }
  return report({ plan: written.plan, options: { out: join(folder, "report") } }, terminal, library, signal);
}

function problemText({ found }: DemoProblem): string {
  return [
    `${found} is not the demo's plan, or was changed since. Nothing was written.`,
    `To use it: closeout report ${found}`,
    "For a fresh demo name another folder: closeout demo DIR",
  ].join("\n");
}
