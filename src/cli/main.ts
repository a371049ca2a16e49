#!/usr/bin/env node
import { version } from "../version.ts";
import { faultText } from "./fault.ts";
import { loadLibrary } from "./library.ts";
import { run } from "./program.ts";
import { type ExitStatus, terminalOf } from "./terminal.ts";

await main(process.argv.slice(2));

async function main(argv: readonly string[]): Promise<void> {
  const terminal = terminalOf(process.stdout, process.stderr, process.env);
  leaveQuietlyWhenThePipeCloses();
  const stop = stopOnSignal();
  try {
    const status = await run(argv, { terminal, load: loadLibrary, signal: stop.signal, version });
    process.exitCode = status;
  } catch (error) {
    terminal.settle();
    const stopped = stop.status();
    if (stopped !== null) {
      terminal.complain("Stopped. No report was written.");
      // The engine's threads may still be winding down.
      process.exit(stopped);
    }
    terminal.complain(faultText(error, argv.includes("--debug")));
    process.exitCode = 1;
  }
}

/** The reader of a pipe may leave early (head): that is no fault. */
function leaveQuietlyWhenThePipeCloses(): void {
  for (const stream of [process.stdout, process.stderr]) {
    stream.on("error", (error: NodeJS.ErrnoException) => {
      if (error.code !== "EPIPE") throw error;
    });
  }
}

/** Ctrl-C asks for an orderly end: the engine stops and what is half written is removed. A second one does not wait. */
function stopOnSignal(): { readonly signal: AbortSignal; status(): ExitStatus | null } {
  const controller = new AbortController();
  let stopped: ExitStatus | null = null;
  const stop = (status: ExitStatus) => () => {
    if (stopped !== null) process.exit(status);
    stopped = status;
    controller.abort();
  };
  process.on("SIGINT", stop(130));
  process.on("SIGTERM", stop(143));
  return { signal: controller.signal, status: () => stopped };
}
