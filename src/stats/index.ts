// Distributions
export { type ChiSquareTest, chiSquareUpperTail } from "./chi-square.ts";
// Tests of counts
export { fisher } from "./fisher.ts";
export { independence } from "./independence.ts";
export { normalCritical, normalTwoSided, normalUpperTail } from "./normal.ts";
export { pearson } from "./pearson.ts";
export { tCritical, tTwoSided } from "./student-t.ts";
