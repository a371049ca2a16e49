import { bonferroniCritical, bonferroniP } from "./bonferroni.ts";
import { normalCritical, normalTwoSided, normalUpperTail } from "./normal.ts";
import { integral } from "./quadrature.ts";
import { root } from "./root.ts";

/**
 * Dunnett's two-sided tail for several variants against one control: P(max |Z_i| >= |z|), each Z_i standard normal, Z_i
 * and Z_j correlated by lambda_i lambda_j.
 *
 *   Z_i = lambda_i Y + s_i E_i    lambda_i^2 = v_c / (v_i + v_c)    s_i^2 = 1 - lambda_i^2
 *   P = 2 * integral over y > 0 of phi(y) (1 - product over i of (1 - q_i(y))),   q_i(y) = P(|lambda_i y + s_i E| >= |z|)
 * The complement stands inside the integral, so far tails keep their digits: relative error under 1e-11 up to |z| = 37.
 * One variant: the normal's, exactly.
 * @param lambdas one a variant, at least one, each in [0, 1]
 *
 * Source: Dunnett 1955, JASA 50, 1096-1121; the one-dimensional integral for any allocation: Dunnett 1989, Applied
 * Statistics 38, 564-579 (AS 251).
 */
export function dunnettP(z: number, lambdas: readonly number[]): number {
  if (lambdas.length === 0) throw new Error("no variant to compare with the control");
  const size = Math.abs(z);
  if (lambdas.length === 1) return normalTwoSided(size);
  if (size === 0) return 1;
  const parts = lambdas.map((lambda) => ({ lambda, s: Math.sqrt((1 - lambda) * (1 + lambda)) }));
  const anyBeyond = (y: number) => {
    let noneBeyond = 0;
    for (const part of parts) noneBeyond += Math.log1p(-Math.min(1, beyond(size, y, part)));
    return density(y) * -Math.expm1(noneBeyond);
  };
  const found = 2 * integral(anyBeyond, panels(size, parts), 1e-12);
  // Rounding must not carry it past the bounds that hold for any correlation: one Z alone, and Bonferroni's.
  const alone = normalTwoSided(size);
  return Math.max(alone, Math.min(found, bonferroniP(alone, lambdas.length)));
}

/**
 * The critical value that makes the intervals of several variants hold at once: dunnettP(critical) = alpha.
 *
 * Between the normal's and Bonferroni's. One variant: the normal's, exactly.
 * @param lambdas as `dunnettP` takes them
 * @param alpha in (0, 1), two-sided, for all intervals together
 *
 * Source: Dunnett 1955; tables of equal arms: Dunnett 1964, Biometrics 20, 482-491.
 */
export function dunnettCritical(lambdas: readonly number[], alpha: number): number {
  const [low, high] = [normalCritical(alpha), bonferroniCritical(alpha, lambdas.length)];
  if (lambdas.length === 1) return low;
  const over = (z: number) => Math.log(dunnettP(z, lambdas) / alpha);
  // Where all Z_i are one, or as good as apart, an end is the answer up to rounding.
  if (over(low) <= 0) return low;
  if (over(high) >= 0) return high;
  return root(over, low, high);
}

interface Part {
  readonly lambda: number;
  readonly s: number;
}

/** q(y) = P(|lambda y + s E| >= z), y >= 0. Without a part of its own, Z is y itself. */
function beyond(z: number, y: number, { lambda, s }: Part): number {
  if (s === 0) return y >= z ? 1 : 0;
  return normalUpperTail((z - lambda * y) / s) + normalUpperTail((z + lambda * y) / s);
}

/** 1 / sqrt(2 pi) */
const DENSITY_AT_0 = 0.3989422804014327;

function density(y: number): number {
  return DENSITY_AT_0 * Math.exp((-y * y) / 2);
}

/**
 * Where the integrand bends: about lambda z, where y lies when Z_i just reaches z, and about z / lambda, from where on
 * nearly every Z_i lies beyond; s and s / lambda are the widths of these. Beyond the end lies under 1e-17 of the tail.
 */
function panels(z: number, parts: readonly Part[]): number[] {
  const end = Math.sqrt(z * z + 80);
  const bends = parts.flatMap(({ lambda, s }) =>
    [-8, 0, 8].flatMap((widths) => [lambda * z + widths * s, (z + widths * s) / lambda]),
  );
  const inside = bends.filter((y) => y > 0 && y < end).sort((a, b) => a - b);
  return [0, ...new Set(inside), end];
}
