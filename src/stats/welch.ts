import { isAbsent } from "./absent.ts";
import { around, estimateOf, type Interval, spreadOf } from "./difference.ts";
import { tCritical, tTwoSided } from "./student-t.ts";
import type { Absent, Level } from "./types.ts";

/**
 * Difference of two levels, variant minus control, with Welch's t interval: for small arms, variances not taken as equal.
 *
 *   t = D / SE    df = V^2 / (v_t^2 / (n_t - 1) + v_c^2 / (n_c - 1))    D -+ t(1 - alpha/2; df) SE
 * df lies between the smaller n - 1 and n_t + n_c - 2; an arm without spread gives it to the other arm's n - 1.
 * @param alpha in (0, 1), the two-sided tail: the same tail 1 - Phi(z) on each side as the normal interval's
 * @returns z holds t; absent as `difference` is
 *
 * Source: Welch 1947, Biometrika 34, 28-35; Satterthwaite 1946, Biometrics Bulletin 2, 110-114, eq. 17.
 */
export function welch(control: Level, variant: Level, alpha: number): Interval | Absent {
  const spread = spreadOf(control, variant);
  if (isAbsent(spread)) return spread;
  const { standardError } = spread;
  const [c, t] = [spread.c / (spread.c + spread.t), spread.t / (spread.c + spread.t)];
  const df = 1 / (t ** 2 / (variant.n - 1) + c ** 2 / (control.n - 1));

  const estimate = estimateOf(control, variant);
  const critical = tCritical(alpha, df);
  const z = estimate / standardError;
  return { ...around(estimate, critical * standardError), standardError, z, p: tTwoSided(z, df), critical, df };
}
