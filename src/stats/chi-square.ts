import gammainc from "@stdlib/math-base-special-gammainc";

/**
 * Upper tail of the chi-square distribution, P(X >= chiSquare) = Q(df/2, chiSquare/2).
 *
 * By the upper incomplete gamma function, never 1 - cdf: relative error under 1e-13 while p > 1e-300.
 * @param df at least 1
 *
 * Source: Abramowitz and Stegun 1964, 26.4.19.
 */
export function chiSquareUpperTail(chiSquare: number, df: number): number {
  return gammainc(chiSquare / 2, df / 2, true, true);
}

/** A chi-square statistic, its degrees of freedom and its p. With nothing to compare: 0 on 0 degrees, p 1. */
export interface ChiSquareTest {
  readonly chiSquare: number;
  readonly df: number;
  readonly p: number;
}

/** Sum of (o - e)^2 / e over pairs of observed and expected, tested on df degrees of freedom. */
export function chiSquareTest(pairs: readonly (readonly [number, number])[], df: number): ChiSquareTest {
  if (df === 0) return { chiSquare: 0, df: 0, p: 1 };
  let chiSquare = 0;
  for (const [observed, expected] of pairs) chiSquare += (observed - expected) ** 2 / expected;
  return { chiSquare, df, p: chiSquareUpperTail(chiSquare, df) };
}
