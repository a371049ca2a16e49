// Distributions

// Contrasts
export { isAbsent } from "./absent.ts";
export { armFigures } from "./arm-figures.ts";
export { bonferroniCritical, bonferroniP } from "./bonferroni.ts";
export { type ChiSquareTest, chiSquareUpperTail } from "./chi-square.ts";
export { contrast } from "./contrast.ts";
// Tests of counts
export { fisher } from "./fisher.ts";
export { independence } from "./independence.ts";
// Moments
export { type Moments, moments } from "./moments.ts";
export { normalCritical, normalTwoSided, normalUpperTail } from "./normal.ts";
export { pearson } from "./pearson.ts";
export { tCritical, tTwoSided } from "./student-t.ts";

// Types
export type { Absent, ArmFigures, Contrast, Difference, Level, Method, Relative } from "./types.ts";
