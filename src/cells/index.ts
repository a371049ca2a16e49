// Roll-ups

export { arms } from "./arms.ts";
export { type Buckets, buckets } from "./buckets.ts";
export { covariateArms, jointSums } from "./joint.ts";

// Exact quotients

export { type Fraction, fraction, nearestNumber } from "./fraction.ts";
export { NANO } from "./sums.ts";

// Types

export type { Arm, BucketCells, BucketSums, CovariateArm, JointSums, PairSums, PowerSums } from "./types.ts";
