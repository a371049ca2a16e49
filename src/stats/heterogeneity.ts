import { chiSquareUpperTail } from "./chi-square.ts";

/** An estimate with its standard error, above 0. */
export interface Measured {
  readonly estimate: number;
  readonly standardError: number;
}

/** Cochran's Q: whether several independent estimates differ by more than chance. */
export interface Heterogeneity {
  readonly q: number;
  /** Estimates less one. */
  readonly df: number;
  readonly p: number;
}

/**
 *   Q = sum w (D - M)^2,   w = 1 / SE^2,   M = sum w D / sum w,   p of chi-square on k - 1 degrees of freedom
 * As k large samples; with small ones Q is too large, for their standard errors are uncertain too.
 * @returns null for fewer than two estimates
 *
 * Source: Cochran 1954, Biometrics 10, 101-129.
 */
export function heterogeneity(estimates: readonly Measured[]): Heterogeneity | null {
  if (estimates.length < 2) return null;
  const weights = estimates.map(({ standardError }) => 1 / (standardError * standardError));
  const all = weights.reduce((sum, weight) => sum + weight, 0);
  const middle = estimates.reduce((sum, { estimate }, i) => sum + (weights[i] ?? 0) * estimate, 0) / all;
  const q = estimates.reduce((sum, { estimate }, i) => sum + (weights[i] ?? 0) * (estimate - middle) ** 2, 0);
  const df = estimates.length - 1;
  return { q, df, p: chiSquareUpperTail(q, df) };
}
