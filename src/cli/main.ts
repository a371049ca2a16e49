#!/usr/bin/env node
import { version } from "../version.ts";
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

/** A fault of ours: what it says and what caused it, outermost first; the stack only when asked for. */
function faultText(error: unknown, debug: boolean): string {
  const causes: Error[] = [];
  for (let cause = error; cause instanceof Error; cause = cause.cause) causes.push(cause);
  if (debug) return causes.map((cause) => cause.stack ?? cause.message).join("\ncaused by ");
  return [
    "A fault of closeout itself, not of the plan or the log:",
    causes.map((cause) => cause.message).join("\n  because: ") || String(error),
    "The same command with --debug says where it happened; please pass that on to the maintainers.",
  ].join("\n");
}
