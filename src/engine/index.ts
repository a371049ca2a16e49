/** From a plan and its log to counts and cells. */
export { reduce, type Progress, type ReduceOptions } from "./reduce.ts";
export { UnusableLog } from "./unusable.ts";
export { unitLineIds } from "./layout.ts";
export type * from "./types.ts";
