/** The entry of `closeout trace`: one unit's rows and the line on which each of them ended. */
import { traceUnit } from "./engine/index.ts";
import type { CloseoutOptions } from "./index.ts";
import { noSuchUnitText, traceText } from "./report/trace.ts";
import { orRefusal, type Refusal, readPlanFile, refusal } from "./run.ts";

export type TraceOptions = Omit<CloseoutOptions, "out">;

/** The text names the unit: it is for a terminal, and no file is written. */
export type TraceOutcome = { readonly status: 0; readonly terminal: string } | Refusal;

/**
 * Follows one unit through a plan's log.
 * @returns status 2 when the plan or a file that it names is wrong, or no row has the unit; 3 when the log cannot be used
 * @throws when the signal aborts, or for a fault of this program
 */
export async function trace(planPath: string, unit: string, options: TraceOptions = {}): Promise<TraceOutcome> {
  const file = await readPlanFile(planPath);
  if ("status" in file) return file;
  const { plan, loaded } = file;
  return orRefusal<TraceOutcome>(file, async () => {
    const found = await traceUnit(plan, loaded.source, file.folder, unit, options);
    if (plan === null || "problems" in found) return refusal(file, "problems" in found ? found.problems : []);
    if ("nearest" in found) return { status: 2, text: noSuchUnitText(plan, unit, found) };
    return { status: 0, terminal: traceText(plan, found) };
  });
}
