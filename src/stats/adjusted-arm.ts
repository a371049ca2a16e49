import { exactly, type Fraction, fraction, NANO, nanoOf, nearestNumber } from "../cells/index.ts";
import type { Arm, JointSums, PowerSums } from "../cells/types.ts";
import { varianceOfMean } from "./mean.ts";
import type { Absent, Level } from "./types.ts";

/** An arm with a covariate: y of all its units with a value, x of those of them that have one, and both together. */
export interface CovariateArm {
  readonly y: PowerSums;
  readonly x: PowerSums;
  readonly joint: JointSums;
}

/** What a contrast is adjusted by: its values are y - theta (x - X). */
export interface Adjustment {
  /** In the unit of y over that of x. */
  readonly theta: number;
  /** X, the mean of x over the units of both arms that have one; the others take it. */
  readonly meanOfX: Fraction;
  /** X - pivot of x, as the values are computed with. */
  readonly fromPivot: number;
  /** Share of the difference's variance that is gone, in [0, 1]; null where y does not vary. */
  readonly varianceReduction: number | null;
  /** Units without an x, of those with a value. */
  readonly missing: { readonly control: number; readonly variant: number };
}

/**
 * The slope with the smallest variance of the adjusted difference, from exact sums.
 *
 *   theta = (cov_t(y, x) / n_t + cov_c(y, x) / n_c) / (var_t(x) / n_t + var_c(x) / n_c)
 * over all units with a y, unbiased in each arm, a missing x being X. Where both arms have one slope it is the common
 * slope of the regression of y on arm and x; where x varies alike in both, the mean slope of the regression with arm and
 * x - X interacting. The variance left is V (1 - r^2): with C and U the two sums above, V of y, r^2 = C^2 / (U V).
 * @returns `no-units` or `few-units` for an arm without or with one unit, `no-covariate` where no unit has an x,
 *   `same-covariate` where x is the same for all units of an arm, in both, `lost-digits` where it differs by less than
 *   its rounding
 *
 * Source: Deng, Xu, Kohavi and Walker 2013, WSDM, 123-132, eq. 4; Yang and Tsiatis 2001, The American Statistician 55,
 * 314-321; Lin 2013, Annals of Applied Statistics 7, 295-318.
 */
export function adjustment(control: CovariateArm, variant: CovariateArm): Adjustment | Absent {
  const arms = [control, variant] as const;
  if (arms.some(({ y }) => y.n === 0)) return { absent: "no-units" };
  if (arms.some(({ y }) => y.n < 2)) return { absent: "few-units" };
  const having = control.joint.n + variant.joint.n;
  if (having === 0) return { absent: "no-covariate" };

  const [c, t] = centredPair(control, variant);
  const u = fraction(c.xx * t.by + t.xx * c.by, c.by * t.by);
  if (!(nearestNumber(u) > c.bound + t.bound)) {
    return { absent: arms.every(({ x }) => x.smallest === x.largest) ? "same-covariate" : "lost-digits" };
  }
  const covariance = fraction(c.xy * t.by + t.xy * c.by, c.by * t.by);
  const v = fraction(c.yy * t.by + t.yy * c.by, c.by * t.by);
  const [scaleY, scaleX] = control.joint.scales;
  const total = control.joint.totalX + variant.joint.totalX;
  const meanOfX = fraction(total, BigInt(having) * NANO);
  const pivot = nanoOf(control.joint.pivots[1]);
  return {
    theta: nearestNumber(over(covariance, u)) * (scaleY / scaleX),
    meanOfX,
    fromPivot: nearestNumber(fraction(total - BigInt(having) * pivot, BigInt(having) * NANO)),
    varianceReduction:
      v.numerator <= 0n ? null : Math.min(1, nearestNumber(over(times(covariance, covariance), times(u, v)))),
    missing: { control: control.y.n - control.joint.n, variant: variant.y.n - variant.joint.n },
  };
}

/**
 * An arm of an adjusted contrast: its mean is exact for the theta given, its spread that of the values.
 *
 *   mean(y) - theta sum (x - X) / n,   n all units with a y
 * A value is computed in doubles: y and x less their pivots, X and theta are each rounded once, so it can be off by
 * 4 eps (|y| + 2 |theta| |x|), |y| and |x| no larger than the scales.
 * @param values sums of y - theta (x - X), of this arm
 */
export function adjustedArm(
  summary: "mean" | "proportion",
  { y, joint }: CovariateArm,
  { theta, meanOfX }: Adjustment,
  values: PowerSums,
): Arm {
  if (y.total === null) throw new Error("an adjusted arm came without the exact total of its values");
  if (values.n !== y.n) throw new Error(`${values.n} adjusted values of ${y.n} units`);
  const n = BigInt(y.n);
  const centred = fraction(
    joint.totalX * meanOfX.denominator - BigInt(joint.n) * NANO * meanOfX.numerator,
    NANO * meanOfX.denominator,
  );
  const taken = times(exactly(theta), centred);
  const mean = fraction(y.total * taken.denominator - NANO * taken.numerator, NANO * taken.denominator * n);
  const [scaleY, scaleX] = joint.scales;
  return {
    kind: "adjusted",
    summary,
    mean,
    sums: values,
    noise: 4 * EPSILON * (scaleY + 2 * Math.abs(theta) * scaleX),
  };
}

/** What a contrast compares of an adjusted arm; v absent as `varianceOfMean` says. */
export function adjustedLevel({ mean, sums, noise }: Extract<Arm, { readonly kind: "adjusted" }>): Level {
  return { n: sums.n, exact: mean, value: nearestNumber(mean), variance: varianceOfMean(sums, noise) };
}

const EPSILON = 2 ** -53; // half a unit in the last place of a double in [1, 2)
const ONE = 1n << 120n;

/** Sums of squares and products about the arm's means, over `by`, which is n (n - 1) times a unit: variances of means. */
interface Centred {
  readonly xx: bigint;
  readonly xy: bigint;
  readonly yy: bigint;
  readonly by: bigint;
  /** How far xx / by can be off by the rounding of its sums. */
  readonly bound: number;
}

/**
 * With H units that have an x, T the sum of their w, and of an arm n units, h of them with an x:
 *
 *   sum w - X = (H s01 - h T) / H                    = a / H
 *   sum (w - X)^2 = (H^2 s02 - 2 H T s01 + h T^2) / H^2    = b / H^2
 *   sum (w - X) u = (H s11 - T s10) / H              = c / H
 *   about the arm's means: (n b - a^2) / (n H^2), (n c - a s1) / (n H), (n s2 - s1^2) / n
 * each over n (n - 1), as whole numbers over one divisor n^2 (n - 1) H^2.
 */
function centredPair(control: CovariateArm, variant: CovariateArm): [Centred, Centred] {
  const having = BigInt(control.joint.n + variant.joint.n);
  const sum = control.joint.s01 + variant.joint.s01;
  return [centred(control, having, sum), centred(variant, having, sum)];
}

function centred({ y, joint }: CovariateArm, having: bigint, sum: bigint): Centred {
  const [n, h] = [BigInt(y.n), BigInt(joint.n)];
  const [s1, s2] = y.powers;
  const a = having * joint.s01 - h * sum;
  const b = having * having * ONE * joint.s02 - 2n * having * sum * joint.s01 + h * sum * sum;
  const c = having * ONE * joint.s11 - sum * joint.s10;
  return {
    xx: n * b - a * a,
    xy: having * (n * c - a * s1),
    yy: having * having * (n * ONE * s2 - s1 * s1),
    by: n * n * (n - 1n) * having * having * ONE * ONE,
    bound: roundingOf(joint, nearestNumber(fraction(sum, having * ONE))) / (y.n * (y.n - 1)),
  };
}

/**
 * How far the sum of squares about the mean can be off: a w is rounded by eps, w^2 by 3 eps, and low sums of negative terms
 * by 2^-113 (as in rounding.ts). Moving each w by its bound moves the sum of (w - X)^2 by no more than twice the product.
 */
function roundingOf({ n, s02 }: JointSums, mean: number): number {
  const squares = nearestNumber(fraction(s02, ONE));
  const sizes = Math.sqrt(n * squares);
  const ofSum = EPSILON * sizes + n * 2 ** -113;
  return (
    2 * (3 * EPSILON * squares + n * 2 ** -113 + 4 * (Math.abs(mean) + Math.sqrt(squares / Math.max(1, n))) * ofSum)
  );
}

const times = (a: Fraction, b: Fraction): Fraction =>
  fraction(a.numerator * b.numerator, a.denominator * b.denominator);
const over = (a: Fraction, b: Fraction): Fraction => fraction(a.numerator * b.denominator, a.denominator * b.numerator);
