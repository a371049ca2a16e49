/** From text to plan. */
export { loadPlan } from "./load.ts";
/** The grammar of numbers and times, for whoever reads a log. */
export { parseNumber } from "./number.ts";
export { planJsonSchema } from "./schema.ts";
export type { PlanSource } from "./source.ts";
export { parseTime } from "./time.ts";
/** The plan itself. */
export type * from "./types.ts";
