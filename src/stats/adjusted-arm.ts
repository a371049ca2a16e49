import { exactly, type Fraction, fraction, NANO, nanoOf, nearestNumber } from "../cells/index.ts";
import type { Arm, CovariateArm, PowerSums } from "../cells/types.ts";
import { varianceOfMean } from "./mean.ts";
import type { Level } from "./types.ts";

export type AdjustedArm = Extract<Arm, { readonly kind: "adjusted" }>;

/**
 * The arms of an adjusted contrast from the sums of their values y - theta (x - X), a missing x being X: with the shape of
 * those values, which joint sums do not tell.
 *
 *   mean(y) - theta sum (x - X) / n,   n all units with a y, exact for the theta given
 * @param theta as `adjusted` gives it
 * @param values sums of the values, of each arm
 */
export function adjustedArms(
  summary: "mean" | "proportion",
  arms: { readonly control: CovariateArm; readonly variant: CovariateArm },
  theta: number,
  values: { readonly control: PowerSums; readonly variant: PowerSums },
): { readonly control: AdjustedArm; readonly variant: AdjustedArm } {
  const meanOfX = meanOfCovariate(arms.control, arms.variant);
  return {
    control: adjustedArm(summary, arms.control, theta, meanOfX, values.control),
    variant: adjustedArm(summary, arms.variant, theta, meanOfX, values.variant),
  };
}

function adjustedArm(
  summary: "mean" | "proportion",
  { value, covariate, joint }: CovariateArm,
  theta: number,
  meanOfX: Fraction,
  sums: PowerSums,
): AdjustedArm {
  if (value.total === null || covariate.total === null) throw new Error("an adjusted arm came without exact totals");
  if (sums.n !== value.n) throw new Error(`${sums.n} adjusted values of ${value.n} units`);
  const [total, of] = [covariate.total * meanOfX.denominator, BigInt(covariate.n) * NANO * meanOfX.numerator];
  const taken = times(exactly(theta), fraction(total - of, NANO * meanOfX.denominator));
  const down = NANO * taken.denominator * BigInt(value.n);
  const mean = fraction(value.total * taken.denominator - NANO * taken.numerator, down);
  return { kind: "adjusted", summary, mean, sums, noise: noiseOf(joint.scales, theta) };
}

/**
 * How far a value can be off, for it is computed in doubles: y and x less their pivots, X and theta are each rounded once,
 *
 *   |error| <= eps (2 |y| + |theta| (|x| + |X| + 3 |x - X|)) <= 4 eps (|y| + 2 |theta| |x|),   eps = 2^-53
 * all from the pivots, so no further than the scales. Without this bound, a y that is x but for its unit would show the
 * noise of y - theta x as its spread.
 */
function noiseOf([y, x]: readonly [number, number], theta: number): number {
  return 4 * 2 ** -53 * (y + 2 * Math.abs(theta) * x);
}

/** What a contrast compares of an adjusted arm; v absent as `varianceOfMean` says. */
export function adjustedLevel({ mean, sums, noise }: AdjustedArm): Level {
  return { n: sums.n, exact: mean, value: nearestNumber(mean), variance: varianceOfMean(sums, noise) };
}

/** X, the mean of x over the units of both arms that have one, at least one. */
function meanOfCovariate(control: CovariateArm, variant: CovariateArm): Fraction {
  const total = (control.covariate.total ?? 0n) + (variant.covariate.total ?? 0n);
  return fraction(total, BigInt(control.covariate.n + variant.covariate.n) * NANO);
}

/** X less the pivot of x, rounded once: what the values are computed with. */
export function meanFromPivot(control: CovariateArm, variant: CovariateArm): number {
  const { numerator, denominator } = meanOfCovariate(control, variant);
  const pivot = nanoOf(control.covariate.pivot);
  return nearestNumber(fraction(numerator * NANO - pivot * denominator, denominator * NANO));
}

const times = (a: Fraction, b: Fraction): Fraction =>
  fraction(a.numerator * b.numerator, a.denominator * b.denominator);
