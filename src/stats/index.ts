// Contrasts

export { isAbsent } from "./absent.ts";
export { armFigures } from "./arm-figures.ts";
export { bonferroniCritical, bonferroniP } from "./bonferroni.ts";
export { contrast } from "./contrast.ts";

// Several questions at once

export { benjaminiHochberg } from "./benjamini-hochberg.ts";
export { dunnettCritical, dunnettP } from "./dunnett.ts";
export { holm } from "./holm.ts";
export { criticalOfSimultaneous, pOfSimultaneous } from "./simultaneous.ts";

// Quantiles

export { type QuantileContrast, quantileContrast } from "./quantile.ts";
export { quantileRanks, type Ranks } from "./quantile-ranks.ts";
export { answered, answeredLater, type RankSearch, type RanksAsked, type RankValues } from "./rank-search.ts";

// Covariates

export { type Balance, balance } from "./balance.ts";
export { type Adjusted, adjusted } from "./covariate.ts";

// Power and sizes

export { type Exaggeration, exaggeration } from "./exaggeration.ts";
export {
  beyondWorthwhile,
  detectable,
  powerWith,
  type Question,
  type SizeForAll,
  sizeForAll,
  unitsFor,
} from "./power.ts";
export { type Ahead, enrolmentDays, meanVariances, type Sizing, shareVariances, sizing } from "./sizing.ts";

// The normal approximation

export { armsAlike } from "./arms-alike.ts";
export { type BootstrapT, bootstrapRelative, bootstrapT } from "./bootstrap-t.ts";
export { type Seed, seedOf } from "./generator.ts";
export type { Histogram } from "./histogram.ts";
export type { LargestShare } from "./largest-share.ts";
export { type Normality, type NormalityArm, normality, normalityOfArms } from "./normality.ts";
export { type Randomisation, randomisation } from "./randomisation.ts";
export { DRAWS, DRAWS_OF_SECONDARY, isNotDrawn, type NotDrawn } from "./resampling.ts";
export type { SkewCorrected } from "./skew-corrected.ts";
export type { TailLevel, TailPair, Tails } from "./tails.ts";

// Tests of counts

export { type ChiSquareTest, chiSquareUpperTail } from "./chi-square.ts";
export { fisher } from "./fisher.ts";
export { independence } from "./independence.ts";
export { pearson } from "./pearson.ts";

// Moments

export { type Moments, moments } from "./moments.ts";

// Distributions

export { normalCritical, normalTwoSided, normalUpperTail } from "./normal.ts";
export { normalQuantile } from "./normal-quantile.ts";
export { tCritical, tTwoSided } from "./student-t.ts";

// Types

export type { Absent, ArmFigures, Contrast, Difference, Level, Method, Relative } from "./types.ts";
