/** From a plan and its log to counts and cells. */

export { unitLineIds } from "./layout.ts";
export { type Progress, type ReduceOptions, reduce } from "./reduce.ts";
export type * from "./types.ts";
export { UnusableLog } from "./unusable.ts";
