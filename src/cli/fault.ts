/** A fault of ours: what it says and what caused it, outermost first; the stack only when asked for. */
export function faultText(error: unknown, debug: boolean): string {
  const causes = causesOf(error);
  if (debug) return causes.map((cause) => cause.stack ?? cause.message).join("\ncaused by ");
  return [
    "A fault of closeout itself, not of the plan or the log:",
    causes.map((cause) => cause.message).join("\n  because: "),
    "The same command with --debug says where it happened; please pass that on to the maintainers.",
  ].join("\n");
}

function causesOf(error: unknown): Error[] {
  if (!(error instanceof Error)) return [new Error(String(error))];
  return error.cause instanceof Error ? [error, ...causesOf(error.cause)] : [error];
}
