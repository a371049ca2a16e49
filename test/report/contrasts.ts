import type { Contrast, Relative } from "../../src/stats/types.ts";

/** An arm by hand: units, mean and sd are enough for every figure of a contrast. */
export interface HandArm {
  readonly units: number;
  readonly mean: number;
  readonly sd: number;
  readonly smallest?: number;
  readonly largest?: number;
}

const Z = 1.959963984540054; // standard normal quantile of 0.975, Abramowitz and Stegun 1964, table 26.1 to the digits there

/** A share of units: s^2 = n p (1 - p) / (n - 1). */
export function shareArm(units: number, share: number): HandArm {
  return { units, mean: share, sd: Math.sqrt((units * share * (1 - share)) / (units - 1)), smallest: 0, largest: 1 };
}

/**
 * A consistent contrast for the tests of the page: difference with z interval, relative by Fieller's quadratic
 * (mean_t - r mean_c)^2 = z^2 (v_t + r^2 v_c). Written apart from src/stats on purpose: the page shows what it is given.
 */
export function handContrast(control: HandArm, variant: HandArm, z = Z): Contrast {
  const vc = control.sd ** 2 / control.units;
  const vt = variant.sd ** 2 / variant.units;
  const standardError = Math.sqrt(vc + vt);
  const estimate = variant.mean - control.mean;
  return {
    control: figures(control),
    variant: figures(variant),
    difference: {
      estimate,
      standardError,
      low: estimate - z * standardError,
      high: estimate + z * standardError,
      z: estimate / standardError,
      p: twoSided(estimate / standardError),
      method: "normal",
    },
    relative: fieller(control.mean, vc, variant.mean, vt, z),
    critical: z,
    df: null,
    why: null,
    beside: [],
  };
}

function fieller(
  c: number,
  vc: number,
  t: number,
  vt: number,
  z: number,
): Relative | { readonly absent: "control-near-zero" } {
  if (c <= z * Math.sqrt(vc)) return { absent: "control-near-zero" };
  const a = c * c - z * z * vc;
  const root = Math.sqrt((t * c) ** 2 - a * (t * t - z * z * vt));
  return { estimate: t / c - 1, low: (t * c - root) / a - 1, high: (t * c + root) / a - 1 };
}

function figures({ units, mean, sd, smallest = 0, largest = 1 }: HandArm) {
  return { units, mean, sd, skewness: 2.5, kurtosis: 9.25, total: mean * units, smallest, largest };
}

/** Abramowitz and Stegun 1964, 7.1.26: absolute error below 1.5e-7, enough for a page. */
function twoSided(z: number): number {
  const x = Math.abs(z) / Math.SQRT2;
  const t = 1 / (1 + 0.3275911 * x);
  const poly = t * (0.254829592 + t * (-0.284496736 + t * (1.421413741 + t * (-1.453152027 + t * 1.061405429))));
  return poly * Math.exp(-x * x);
}
