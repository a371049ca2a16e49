// Roll-ups
export { arms } from "./arms.ts";
// By bucket, for resampling
export { bucketNumbers, bucketPairs, bucketSums, withoutX } from "./buckets.ts";
// Other choices
export { armsWithoutLargest, type ChoiceArms, choiceArms, loggedArms } from "./choice-arms.ts";
// Exact quotients
export { exactly, type Fraction, fraction, nearestNumber } from "./fraction.ts";
// Days and levels
export { accumulated, type GroupSums, groupArms, groupCovariates, groupSums } from "./group-arms.ts";
export { adjustedSums, covariateArms, jointSums } from "./joint.ts";
export { sumsOfSquares } from "./pair-ratio.ts";
// Adjusted contrasts
export { partSums, scoreSums } from "./roll-up.ts";
// how an arm's values lie
export { type Bin, beyond, type Shape, shape } from "./shape.ts";
export { NANO, nanoOf } from "./sums.ts";
// Types
export type { Arm, BucketSums, CovariateArm, JointSums, PairSums, PowerSums } from "./types.ts";
