import { expansionOf, type ShapedArm } from "./expansion.ts";

/** How far one shape for both arms counts, at most; ours, by the calibration bench. */
const POOLED_AT_MOST = 0.6;

/** The correction of the studentised difference for the skewness of its estimate, and what that costs. */
export interface Correction {
  /** a, the skewness of the estimate that is corrected for. */
  readonly skew: number;
  /** g(T) = T + A T^2 + A^2 T^3 / 3 + C */
  readonly square: number;
  readonly constant: number;
  /** R(z) = beta z + alpha z^3, by which the critical value grows. */
  readonly alpha: number;
  readonly beta: number;
}

/**
 * Hall's cubic transformation, monotone, with a skewness that is half own and half pooled, and the critical value widened
 * for what is left.
 *
 *   g(T) = T + A T^2 + A^2 T^3 / 3 + C,   A = a / 3 - S,   C = a / 6 + S0 - S;   not rejected where |g(T)| <= z + R(z)
 * - a = (1 - q) a_own + q a_pooled. a_own has each arm's own g1, v and n. a_pooled is for two samples of one distribution,
 *   g (1 / n_t^2 - 1 / n_c^2) / (1 / n_t + 1 / n_c)^1.5, 0 for arms of one size. The smaller arm of a heavy-tailed metric
 *   seldom shows its tail, so its own skewness is too small just when the interval misses; the larger arm's is better.
 * - q = 0.6 alike (1 - smaller n / larger n): nothing to gain from pooling at one size, and wrong where shapes differ.
 * - R makes the interval right to the order 1 / n on each side, with what is left of the expansion after the transformation
 *   and with rho = B - 3 a^2 / 2, the slope of the estimated a_own on T (its noise: one large unit moves both):
 *     R(x) = (1 - q) rho x (2 x^2 + 1) / 6 - B x (x^2 - 3) / 12 + a^2 x (20 x^2 - 39) / 216 + E x (x^2 + 1) / 4
 *   The terms with a^2 count by min(1, 2 q): an own a^2 is mostly noise, and leaving them out only widens. alpha and beta
 *   are never below 0, nor is B, so the intervals of all alpha are nested.
 * @param alike 1 to 0, see `armsAlike`
 *
 * Source: Hall 1992, JRSS B 54, 221-228, for the transformation; R derived for this tool from `departures`; weights ours.
 */
export function skewCorrection(control: ShapedArm, variant: ShapedArm, alike: number): Correction {
  return correctionWith(pooledSkew(control, variant), control, variant, alike);
}

/** The same for a level of the control that is taken times `factor`: shapes are kept, pooled ones as they are at 1. */
export function skewCorrectionAt(factor: number, control: ShapedArm, variant: ShapedArm, alike: number): Correction {
  const scaled: ShapedArm = {
    ...control,
    variance: factor ** 2 * control.variance,
    skewness: factor < 0 ? -control.skewness : control.skewness,
    ratio: control.ratio === null ? null : factor * control.ratio,
  };
  return correctionWith(pooledSkew(control, variant), scaled, variant, alike);
}

function correctionWith(pooled: number, control: ShapedArm, variant: ShapedArm, alike: number): Correction {
  const { skew: own, kurtosis, freedom, lean, shift } = expansionOf(control, variant);
  const q = POOLED_AT_MOST * alike * (1 - Math.min(control.n, variant.n) / Math.max(control.n, variant.n));
  const skew = (1 - q) * own + q * pooled;
  const b = Math.max(0, kurtosis);
  const square = skew ** 2 * Math.min(1, 2 * q);
  const rho = (1 - q) * (b - 1.5 * square);
  return {
    skew,
    square: skew / 3 - lean,
    constant: skew / 6 + shift - lean,
    alpha: Math.max(0, rho / 3 - b / 12 + (20 / 216) * square + freedom / 4),
    beta: Math.max(0, rho / 6 + b / 4 - (39 / 216) * square + freedom / 4),
  };
}

function pooledSkew(control: ShapedArm, variant: ShapedArm): number {
  const [c, t] = [1 / control.n, 1 / variant.n];
  const skewness = (control.n * control.skewness + variant.n * variant.skewness) / (control.n + variant.n);
  return (skewness * (t * t - c * c)) / (t + c) ** 1.5;
}

/** g(T). */
export function transformed(t: number, { square, constant }: Correction): number {
  return t + square * t * t + (square * square * t * t * t) / 3 + constant;
}

/** The T with g(T) = y, of every y. */
export function untransformed(y: number, { square, constant }: Correction): number {
  const u = y - constant;
  // (cbrt(1 + 3 A u) - 1) / A without the difference, so that A may be 0.
  const root = Math.cbrt(1 + 3 * square * u);
  return (3 * u) / (root * root + root + 1);
}

/** z + R(z). */
export function widened(z: number, { alpha, beta }: Correction): number {
  return z * (1 + beta + alpha * z * z);
}

/** The z of which z + R(z) is y, y >= 0: Newton's steps on a convex rise, from above. */
export function narrowed(y: number, { alpha, beta }: Correction): number {
  let z = y / (1 + beta);
  for (let step = 0; step < 100; step++) {
    const next = z - (z * (1 + beta + alpha * z * z) - y) / (1 + beta + 3 * alpha * z * z);
    if (!(next < z)) break;
    z = next;
  }
  return z;
}
