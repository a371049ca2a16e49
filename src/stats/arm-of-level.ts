import { exactly, fraction, sumsOfSquares } from "../cells/index.ts";
import type { Arm, PowerSums } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import type { AdjustedArm } from "./adjusted-arm.ts";
import type { ArmFigures, Level } from "./types.ts";

/**
 * An adjusted arm of which only the level is known, without its units' values: n, mean and
 *
 *   sum (y - mean)^2 = n (n - 1) v
 * so that it can be compared as any other. Its shape is not known.
 * @param level with a variance
 */
export function armOfLevel(summary: AdjustedArm["summary"], { n, exact, variance }: Level): AdjustedArm {
  if (isAbsent(variance)) throw new Error(`a level of ${n} units came without a variance: ${variance.absent}`);
  const { numerator, denominator } = exactly(variance);
  const squares = fraction(numerator * BigInt(n) * BigInt(n - 1), denominator);
  return { kind: "adjusted", summary, mean: exact, sums: sumsOfSquares(n, squares), noise: 0 };
}

/**
 * An arm of which only the sum of squares is known, with the shape of another: of nearly the same units, under the plan's
 * own choice. An arm that knows its shape stays as it is.
 */
export function shapedAs(arm: Arm, { skewness, kurtosis }: ArmFigures): Arm {
  if (skewness === null || kurtosis === null) return arm;
  if (arm.kind === "adjusted") return { ...arm, sums: withShape(arm.sums, skewness, kurtosis) };
  if (arm.kind === "ratio" && arm.score !== null) return { ...arm, score: withShape(arm.score, skewness, kurtosis) };
  return arm;
}

/** S_3 = n g1 m2^1.5 and S_4 = n (g2 + 3) m2^2, m2 = S_2 / n, of values about 0. */
function withShape(sums: PowerSums, skewness: number, kurtosis: number): PowerSums {
  const [s1, s2, s3, s4] = sums.powers;
  if (s3 !== 0n || s4 !== 0n || s2 === 0n) return sums;
  const m2 = Number(s2) / 2 ** 120 / sums.n;
  const third = sums.n * skewness * m2 ** 1.5;
  const fourth = sums.n * (kurtosis + 3) * m2 ** 2;
  return { ...sums, powers: [s1, s2, asPower(third), asPower(fourth)] };
}

/** A sum of powers in units of 2^-120. */
function asPower(sum: number): bigint {
  const { numerator, denominator } = exactly(sum);
  return (numerator << 120n) / denominator;
}
