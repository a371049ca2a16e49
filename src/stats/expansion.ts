import { normalUpperTail } from "./normal.ts";

/** What the distribution of a studentised difference needs of one arm; g1 and g2 are those of its units. */
export interface ShapedArm {
  readonly n: number;
  /** v, the variance of the arm's level. */
  readonly variance: number;
  /** g1 */
  readonly skewness: number;
  /** g2, the excess over the normal distribution's. */
  readonly kurtosis: number;
  /** For a ratio of totals c = cov(a - R b, b) / (n mean(b)^2), else null. */
  readonly ratio: number | null;
}

/** The coefficients of the expansion; all are 0 where the normal distribution is exact but for the divisor. */
export interface Expansion {
  /** a, the skewness of the estimate itself. */
  readonly skew: number;
  /** B, its excess kurtosis. */
  readonly kurtosis: number;
  /** E, one over the degrees of freedom of its variance if the units were normal. */
  readonly freedom: number;
  /** S and S0: a ratio's variance leans on its denominator, and its estimate is biased by it. */
  readonly lean: number;
  readonly shift: number;
}

/**
 * The coefficients for the difference of two levels, variant minus control, with w_i = v_i / V:
 *
 *   a = (g_t v_t^1.5 / sqrt(n_t) - g_c v_c^1.5 / sqrt(n_c)) / SE^3     B = k_t w_t^2 / n_t + k_c w_c^2 / n_c
 *   E = w_t^2 / n_t + w_c^2 / n_c     S = (w_t c_t - w_c c_c) / SE     S0 = (c_t - c_c) / SE
 * With equal g, v and n the arms' skewnesses cancel. A level times a factor: v by its square, c by the factor.
 * @returns V = v_t + v_c must be above 0
 *
 * Source: Hall 1992, The Bootstrap and Edgeworth Expansion, 2.6 and 3.10; S and S0 are derived for this tool.
 */
export function expansionOf(control: ShapedArm, variant: ShapedArm): Expansion {
  const total = variant.variance + control.variance;
  const standardError = Math.sqrt(total);
  const [wt, wc] = [variant.variance / total, control.variance / total];
  const [ct, cc] = [variant.ratio ?? 0, control.ratio ?? 0];
  return {
    skew: variant.skewness * Math.sqrt(wt ** 3 / variant.n) - control.skewness * Math.sqrt(wc ** 3 / control.n),
    kurtosis: (variant.kurtosis * wt ** 2) / variant.n + (control.kurtosis * wc ** 2) / control.n,
    freedom: wt ** 2 / variant.n + wc ** 2 / control.n,
    lean: (wt * ct - wc * cc) / standardError,
    shift: (ct - cc) / standardError,
  };
}

/**
 * The arms with one shape: g = (n_t g1_t + n_c g1_c) / (n_t + n_c), k likewise. An arm whose units do not vary has no
 * shape and takes the other's.
 */
export function withPooledShape(control: ShapedArm, variant: ShapedArm): [control: ShapedArm, variant: ShapedArm] {
  const weight = (arm: ShapedArm) => (arm.variance > 0 ? arm.n : 0);
  const [c, t] = [weight(control), weight(variant)];
  const pooled = (ofControl: number, ofVariant: number) => (c * ofControl + t * ofVariant) / (c + t);
  const skewness = pooled(control.skewness, variant.skewness);
  const kurtosis = pooled(control.kurtosis, variant.kurtosis);
  return [
    { ...control, skewness, kurtosis },
    { ...variant, skewness, kurtosis },
  ];
}

/**
 * P(T <= x) - Phi(x) for the studentised difference T, in two parts: of the order of 1 / sqrt(n), and of 1 / n.
 *
 *   first = phi(x) (a (2x^2 + 1) / 6 + S0 - S (x^2 + 1))
 *   second = phi(x) x (B (x^2 - 3) / 12 - a^2 (x^4 + 2x^2 - 3) / 18 - E (x^2 + 1) / 4)
 * for a standard error from unbiased variances.
 *
 * Source: Hall 1992, 2.6, eq. 2.84 (one sample, biased variance: there x^2 + 3); Zhou and Dinh 2005, Biostatistics 6,
 * 187-200, for two samples the first part; the second agrees with Gerlovina and Hubbard 2021, arXiv 2105.07406.
 */
export function departures(x: number, { skew, kurtosis, freedom, lean, shift }: Expansion): [number, number] {
  const square = x * x;
  const density = Math.exp(-square / 2) / Math.sqrt(2 * Math.PI);
  const first = (skew * (2 * square + 1)) / 6 + shift - lean * (square + 1);
  const second =
    (kurtosis * (square - 3)) / 12 -
    (skew ** 2 * (square * square + 2 * square - 3)) / 18 -
    (freedom * (square + 1)) / 4;
  return [density * first, density * x * second];
}

/** P(T < -z) and P(T > z) by the expansion, held to [0, 1]: far from normal it can leave that, and then says only "far". */
export function tailsOf(z: number, expansion: Expansion): { readonly lowerTail: number; readonly upperTail: number } {
  const nominal = normalUpperTail(z);
  const [first, second] = departures(-z, expansion);
  // At z the first part is the same, the second turns its sign: the tail above is nominal - (first - second).
  return { lowerTail: within(nominal + first + second), upperTail: within(nominal - first + second) };
}

function within(probability: number): number {
  return Math.min(1, Math.max(0, probability));
}
