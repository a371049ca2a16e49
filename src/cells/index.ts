// Roll-ups
export { arms } from "./arms.ts";
// Exact quotients
export { type Fraction, fraction, nearestNumber } from "./fraction.ts";
export { covariateArms, jointSums } from "./joint.ts";
export { NANO } from "./sums.ts";

// Types
export type { Arm, CovariateArm, JointSums, PowerSums } from "./types.ts";
