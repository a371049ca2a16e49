import { type ChiSquareTest, chiSquareTest } from "./chi-square.ts";

/**
 * Do the counts split as the shares say?
 *
 *   e_i = N share_i / sum of shares    chiSquare = sum (o_i - e_i)^2 / e_i    df = k - 1
 * @param counts k counts, whole numbers
 * @param shares k shares above 0; they need not add up to 1
 * @returns p 1 on 0 degrees of freedom when there is one count only or all are 0
 *
 * Source: Pearson 1900, Philosophical Magazine 50, 157-175.
 */
export function pearson(counts: readonly number[], shares: readonly number[]): ChiSquareTest {
  const total = sum(counts);
  const whole = sum(shares);
  const pairs = counts.map((count, i) => [count, (total * (shares[i] ?? 0)) / whole] as const);
  return chiSquareTest(pairs, total === 0 ? 0 : counts.length - 1);
}

function sum(values: readonly number[]): number {
  return values.reduce((a, b) => a + b, 0);
}
