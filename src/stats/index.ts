// Distributions

export type { BucketCells } from "../cells/types.ts";
// Contrasts
export { isAbsent } from "./absent.ts";
export { type AdjustedArm, adjustedArms, meanFromPivot } from "./adjusted-arm.ts";
export { armFigures } from "./arm-figures.ts";
export { armOfLevel, shapedAs } from "./arm-of-level.ts";
// Normal approximation
export { armsAlike } from "./arms-alike.ts";
// Covariates
export { type Balance, balance, type Counted, standardisedShares } from "./balance.ts";
// Time and subgroups
export { type BandFor, bandCritical } from "./band.ts";
// More than one question
export { benjaminiHochberg } from "./benjamini-hochberg.ts";
export { bonferroniCritical, bonferroniP } from "./bonferroni.ts";
export type { BootstrapT } from "./bootstrap-t.ts";
export { type ChiSquareTest, chiSquareUpperTail } from "./chi-square.ts";
export { type Alike, contrast, contrastBy } from "./contrast.ts";
export { type Adjusted, type AdjustedBy, adjusted, adjustedPart } from "./covariate.ts";
export { dunnettCritical, dunnettP } from "./dunnett.ts";
// Power and sizes
export { type Exaggeration, exaggeration } from "./exaggeration.ts";
// Tests of counts
export { fisher } from "./fisher.ts";
export { type Heterogeneity, heterogeneity } from "./heterogeneity.ts";
export type { Histogram } from "./histogram.ts";
export { holm } from "./holm.ts";
export { independence } from "./independence.ts";
export type { LargestShare } from "./largest-share.ts";
export { level } from "./level.ts";
// Planned looks
export { alphaSpent, driftOfLooks, type Looks, lookBoundaries, lookCritical, pOfLooks } from "./looks.ts";
// Moments
export { type Moments, moments } from "./moments.ts";
export { normalCritical, normalTwoSided, normalUpperTail } from "./normal.ts";
export { normalQuantile } from "./normal-quantile.ts";
export { type Normality, normality } from "./normality.ts";
export { pearson } from "./pearson.ts";
export {
  beyondWorthwhile,
  detectable,
  powerWith,
  type Question,
  type SizeForAll,
  sizeForAll,
  unitsFor,
} from "./power.ts";
// Quantiles
export { type QuantileContrast, quantileContrast } from "./quantile.ts";
export { type QuantileArm, quantileSearch, quantilesCompared } from "./quantile-arms.ts";
export { quantileRanks, type Ranks } from "./quantile-ranks.ts";
export { answered, answeredLater, type RankSearch, type RanksAsked, type RankValues } from "./rank-search.ts";
export { relativeByEnds } from "./relative-by-ends.ts";
export { type Resampled, resampled, seedOfCells, type ToDraw } from "./resampled.ts";
export { DRAWS, DRAWS_OF_SECONDARY, drawsReach, isNotDrawn, type NotDrawn } from "./resampling.ts";
export { type Counts, counts } from "./share.ts";
export { criticalOfSimultaneous, pOfSimultaneous } from "./simultaneous.ts";
export { type Ahead, enrolmentDays, meanVariances, type Sizing, shareVariances, sizing } from "./sizing.ts";
export { tCritical, tTwoSided } from "./student-t.ts";
export { tailLevel } from "./tail-level.ts";
export { CAUTION_SHARE, type TailLevel, type TailPair, type Tails } from "./tails.ts";

// Types
export type { Absent, ArmFigures, Contrast, Difference, Level, Method, Relative } from "./types.ts";
