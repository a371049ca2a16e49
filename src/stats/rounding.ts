import type { PowerSums } from "../cells/types.ts";

type Four = PowerSums["powers"];

const EPSILON = 2 ** -53; // half a unit in the last place of a double in [1, 2)
const UNIT = 2 ** 120; // units of a power sum in 1
/** Covers the terms of second order and the rounding of the bounds' own arithmetic, many times over. */
const SLACK = 1 + 2 ** -30;

/**
 * How far each power sum S_k can lie from the exact sum of ((x - pivot) / scale)^k, in units of 2^-120.
 *
 *   E_k = (2k - 1) eps A_k  +  n g_k  +  sum over j = 1..k of C(k, j) A_(k - j) noise^j,   A_j >= sum |u|^j, eps = 2^-53
 * First part: u is rounded once from the exact decimal, k roundings of it and k - 1 of the products in u^k. Second: the
 * two integers of a term. t = u^k 2^60 splits exactly, but for -1 < t < 0, where t - floor(t) = 1 - |t| is rounded by up
 * to 2^-54, so g = 2^-113 for odd k and 2^-120 for even k. Third: x itself may be off, by `noise` scales at most (a
 * ratio's score is computed from rounded numbers). A_1 and A_3 by Cauchy's inequality from S_2 and S_4.
 *
 * Source: Higham 2002, Accuracy and Stability of Numerical Algorithms, lemma 3.1; the parts are derived for this tool.
 */
export function sumBounds({ n, powers }: PowerSums, noise: number): Four {
  const squares = Number(powers[1]) / UNIT;
  const fourths = Number(powers[3]) / UNIT;
  const sizes = [n, Math.sqrt(n * squares), squares, Math.sqrt(squares * fourths), fourths] as const;
  const bound = (k: 1 | 2 | 3 | 4): bigint => {
    let error = (2 * k - 1) * EPSILON * sizes[k] + n * (k % 2 === 1 ? 2 ** -113 : 2 ** -120);
    for (let j = 1; j <= k; j++) error += choose(k, j) * (sizes[k - j] ?? 0) * noise ** j;
    return BigInt(Math.ceil(error * SLACK * UNIT));
  };
  return [bound(1), bound(2), bound(3), bound(4)];
}

function choose(k: number, j: number): number {
  let ways = 1;
  for (let i = 0; i < j; i++) ways = (ways * (k - i)) / (i + 1);
  return ways;
}
