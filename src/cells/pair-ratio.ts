import { type Fraction, fraction, nearestNumber } from "./fraction.ts";
import { NANO, nanoOf } from "./sums.ts";
import type { Arm, JointSums, PowerSums } from "./types.ts";

/** One in the units of a power sum. */
const ONE_BITS = 120;

/**
 * A ratio's arm from the joint sums of its numerator a and denominator b, without a look at the units' scores:
 *
 *   sum d^2 = (C_aa - 2 R C_ab + R^2 C_bb) / mean(b)^2,   C_jk central sums, R = sum a / sum b
 * exact from the sums, rounded to 2^-120 of the score's scale. Of the score's sums only S_1 = 0 and S_2 are known; its ends
 * are said to differ wherever the scores do.
 * @param numerator a over the same units
 */
export function ratioOfPairs(numerator: PowerSums, joint: JointSums): Arm {
  const [, totalOfB] = joint.totals;
  if (numerator.n !== joint.n) throw new Error(`${joint.n} pairs for ${numerator.n} numerators`);
  const denominator = secondOf(joint);
  if (joint.n === 0 || totalOfB === 0n) return { kind: "ratio", numerator, denominator, score: null };
  return { kind: "ratio", numerator, denominator, score: sumsOfSquares(joint.n, squaresOfScore(joint)), joint };
}

/** x alone; its ends are as far as its scale reaches, for a pair does not tell them. */
export function secondOf({ n, pivots, scales, s01, s02, totals }: JointSums): PowerSums {
  const [pivot, scale] = [pivots[1], scales[1]];
  const ends = n === 0 ? [null, null] : [Number(pivot) - scale, Number(pivot) + scale];
  const [smallest = null, largest = null] = ends;
  return { n, pivot, scale, powers: [s01, s02, 0n, 0n], total: totals[1], smallest, largest };
}

/** Values about 0 of which n and the sum of squares are known. */
export function sumsOfSquares(n: number, squares: Fraction): PowerSums {
  const reach = Math.sqrt(nearestNumber(squares));
  const exponent = reach === 0 ? 0 : Math.ceil(Math.log2(reach));
  const bits = ONE_BITS - 2 * exponent;
  const { numerator, denominator } = squares;
  const s2 = bits >= 0 ? (numerator << BigInt(bits)) / denominator : numerator / (denominator << BigInt(-bits));
  const end = reach === 0 ? 0 : reach;
  return {
    n,
    pivot: "0",
    scale: 2 ** exponent,
    powers: [0n, s2, 0n, 0n],
    total: null,
    smallest: -end,
    largest: end,
  };
}

/**
 *   n sum (a - R b)^2 = s_a^2 N_20 - 2 R s_a s_b N_11 + R^2 s_b^2 N_02,   N_jk = n S_jk - S_j0 S_0k
 * with the scales s_a and s_b, over n mean(b)^2.
 */
function squaresOfScore({ n: units, scales, s10, s01, s20, s11, s02, totals }: JointSums): Fraction {
  const n = BigInt(units);
  const [a, b] = totals;
  const [ofA, ofB] = scales.map((scale) => Math.round(Math.log2(scale)));
  if (ofA === undefined || ofB === undefined) throw new Error("a pair without scales");
  const least = Math.min(ofA, ofB);
  const [byA, byB] = [BigInt(ofA - least), BigInt(ofB - least)];
  const one = 1n << BigInt(ONE_BITS);
  const central = (sum: bigint, first: bigint, second: bigint) => n * sum * one - first * second;
  // times b^2, so that R = a / b leaves whole numbers
  const inside =
    ((b * b * central(s20, s10, s10)) << (2n * byA)) -
    ((2n * a * b * central(s11, s10, s01)) << (byA + byB)) +
    ((a * a * central(s02, s01, s01)) << (2n * byB));
  // sum d^2 = inside / (n b^2) / mean(b)^2, mean(b) = b / (n 10^9), in units of 2^-240 and of 2^least squared
  const squares = fraction((inside < 0n ? 0n : inside) * n * NANO * NANO, b ** 4n);
  const shift = 2 * least - 2 * ONE_BITS;
  return shift >= 0
    ? fraction(squares.numerator << BigInt(shift), squares.denominator)
    : fraction(squares.numerator, squares.denominator << BigInt(-shift));
}

/** The pivots as whole numbers of 10^-9. */
export const pivotsOf = ({ pivots }: JointSums): readonly [bigint, bigint] => [nanoOf(pivots[0]), nanoOf(pivots[1])];
