import { exactly, type Fraction, fraction, NANO, nearestNumber } from "../cells/index.ts";
import type { Arm, JointSums, PowerSums } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { armFigures } from "./arm-figures.ts";
import type { ShapedArm } from "./expansion.ts";
import { level } from "./level.ts";
import { moments } from "./moments.ts";
import type { Absent } from "./types.ts";

/** One in the units of a power sum. */
const ONE = 1n << 120n;

type Ratio = Extract<Arm, { readonly kind: "ratio" }>;

/**
 * An arm as the expansion takes it: n, v, g1, g2 and, of a ratio, c.
 *
 * A skewness below its rounding bound is 0, for that is what it cannot be told from; a kurtosis can be lost in rounding.
 * @returns as the level where it has no variance; `lost-digits` without a kurtosis
 */
export function shapedArm(arm: Arm): ShapedArm | Absent {
  const found = level(arm);
  if (isAbsent(found)) return found;
  if (isAbsent(found.variance)) return found.variance;
  const { n, variance } = found;
  if (variance === 0) return { n, variance, skewness: 0, kurtosis: 0, ratio: null };
  const { skewness, kurtosis } = armFigures(arm);
  if (kurtosis === null) return { absent: "lost-digits" };
  return { n, variance, skewness: skewness ?? 0, kurtosis, ratio: arm.kind === "ratio" ? ratioTerm(arm) : null };
}

/**
 * c = cov(a - R b, b) / (n mean(b)^2) of a ratio of totals, exact from the joint sums of a and b.
 *
 * Without joint sums, with e = a - R b, a is e + R b, so cov(e, b) = (var a - var e - R^2 var b) / (2 R), where
 * var e = mean(b)^2 var d, d the score.
 * @returns null where b adds up to 0; without joint sums also where R is 0, for then a says nothing about b, and where a
 *   variance is lost in rounding
 */
export function ratioTerm({ numerator, denominator, score, joint }: Ratio): number | null {
  if (score === null || numerator.total === null || !denominator.total) return null;
  const ratio = fraction(numerator.total, denominator.total);
  const meanOfB = nearestNumber(fraction(denominator.total, BigInt(denominator.n) * NANO));
  if (joint) return covarianceOfScore(joint, ratio) / (denominator.n * meanOfB * meanOfB);
  const r = nearestNumber(ratio);
  const [a, b, d] = [varianceOf(numerator), varianceOf(denominator), varianceOf(score)];
  if (r === 0 || a === null || b === null || d === null) return null;
  return ((a - r * r * b) / (meanOfB * meanOfB) - d) / (2 * r * numerator.n);
}

/** cov(a - R b, b) over n - 1, from whole numbers: the two parts may be far larger than what is left of them. */
function covarianceOfScore({ n, scales, s10, s01, s11, s02 }: JointSums, ratio: Fraction): number {
  const [scaleA, scaleB] = scales;
  const size = BigInt(n);
  const ofPair = size * ONE * s11 - s10 * s01;
  const ofB = size * ONE * s02 - s01 * s01;
  // R in units of the scales, which are powers of two: exact.
  const step = exactly(scaleB / scaleA);
  const by = ratio.denominator * step.denominator;
  const left = fraction(ofPair * by - ratio.numerator * step.numerator * ofB, by * size * (size - 1n) * ONE * ONE);
  return nearestNumber(left) * scaleA * scaleB;
}

function varianceOf(sums: PowerSums): number | null {
  return sums.smallest === sums.largest ? 0 : moments(sums).variance;
}
