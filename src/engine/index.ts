/** From a plan and its log to counts and cells. */

export { isFile, logFiles } from "./files.ts";
export { unitLineIds } from "./layout.ts";
export { reduce, withReduction } from "./reduce.ts";
export type { AdjustedRequest, Session } from "./session.ts";
export { type NoSuchUnit, type TracedRow, traceUnit, type UnitTrace } from "./trace.ts";
export type * from "./types.ts";
export { UnusableLog } from "./unusable.ts";
export type { Progress, ReduceOptions } from "./withLog.ts";
