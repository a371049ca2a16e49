/** What was asked afterwards, as a plan of its own. */
export { planAfterwards } from "./afterwards.ts";
/** What differs between two plans, and the fingerprint of what decides. */
export { mergedNames, type PlanChange, planChanges, planIn } from "./changes.ts";
export { combinedPlan, type PlanStep, planSteps } from "./combine.ts";
/** From text to plan. */
export { type LoadedPlan, loadPlan } from "./load.ts";
/** Problems: those that only the log can show, and all of them in words. */
export { type FoundFile, type FoundLog, logProblems, noSuchFile, noSuchList } from "./log.ts";
/** The grammar of numbers and times, for whoever reads a log. */
export { parseNumber } from "./number.ts";
export { placeProblems, unreadablePlan } from "./problems.ts";
export { planJsonSchema } from "./schema.ts";
export { SEALED_PARTS, type Seal, type SealedPart, sealDifference, sealOf } from "./seal.ts";
export type { PlanSource } from "./source.ts";
export { parseTime } from "./time.ts";
/** The plan itself. */
export type * from "./types.ts";
