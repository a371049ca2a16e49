import type { Reduction } from "../../src/engine/types.ts";

/** How the tests reach the product: here alone. */
export interface RunOptions {
  readonly threads?: number;
}

/** The engine's reduction of a plan file's log. */
export async function runEngine(planPath: string, _options: RunOptions = {}): Promise<Reduction> {
  throw new Error(`the engine is not connected yet, for ${planPath}`);
}

/** The parts of report.json that may not depend on the order, the files or the threads of a log, as text. */
export async function runReport(
  planPath: string,
  _options: RunOptions = {},
): Promise<{ readonly effects: string; readonly flow: string; readonly checks: string }> {
  throw new Error(`the library is not connected yet, for ${planPath}`);
}
