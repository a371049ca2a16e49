import { exactly, fraction, sumsOfSquares } from "../cells/index.ts";
import { isAbsent } from "./absent.ts";
import type { AdjustedArm } from "./adjusted-arm.ts";
import type { Level } from "./types.ts";

/**
 * An adjusted arm of which only the level is known, without its units' values: n, mean and
 *
 *   sum (y - mean)^2 = n (n - 1) v
 * so that it can be compared as any other. Its shape is not known, and not to be asked for.
 * @param level with a variance
 */
export function armOfLevel(summary: AdjustedArm["summary"], { n, exact, variance }: Level): AdjustedArm {
  if (isAbsent(variance)) throw new Error(`a level of ${n} units came without a variance: ${variance.absent}`);
  const { numerator, denominator } = exactly(variance);
  const squares = fraction(numerator * BigInt(n) * BigInt(n - 1), denominator);
  return { kind: "adjusted", summary, mean: exact, sums: sumsOfSquares(n, squares), noise: 0 };
}
