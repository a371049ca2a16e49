import { exactly, type Fraction, fraction, NANO, nearestNumber } from "../cells/index.ts";
import type { CovariateArm, PowerSums } from "../cells/types.ts";
import { type Bounded, centreOf, ONE, type SecondMoments, secondMoments } from "./covariate-moments.ts";
import type { Absent, Level } from "./types.ts";

/** Two arms adjusted for a covariate x known before enrolment. */
export interface Adjusted {
  /** The slope: y's unit for one of x. */
  readonly theta: number;
  /** X, the mean of x over the units of both arms that have one. */
  readonly centre: number;
  /** Levels of y - theta (x - X), to be compared as any others. */
  readonly control: Level;
  readonly variant: Level;
  /** 1 - V adjusted / V: the share of the variance of the difference that the adjustment takes away. */
  readonly varianceReduction: number;
  /** Units whose x is missing: it is put at X. */
  readonly withoutCovariate: { readonly control: number; readonly variant: number };
}

/**
 * A mean or proportion adjusted for a covariate, by the slope that gives the difference its smallest variance.
 *
 *   theta = (cov_t / n_t + cov_c / n_c) / (var_t(x) / n_t + var_c(x) / n_c)
 *   level = mean(y) - theta (mean(x) - X)    v = (var(y) - 2 theta cov + theta^2 var(x)) / n
 * cov and var unbiased, a missing x at X. The adjusted levels keep the level of y, so Fieller applies. With arms of one
 * size theta is the slope of the regression on arm and x; with one variance of x in both arms, the difference is that of the
 * regression with a slope of its own in each arm. All in whole numbers, each figure rounded once.
 * @returns `no-units`; `few-units` with one unit in an arm; `zero-variance` where y does not vary; `no-covariate` where no unit
 *   has an x; `same-covariate` where x does not vary within the arms; `lost-digits` where y is x but for rounding
 *
 * Source: Deng, Xu, Kohavi and Walker 2013, WSDM, 123-132; Yang and Tsiatis 2001, The American Statistician 55, 314-321;
 * Lin 2013, Annals of Applied Statistics 7, 295-318.
 */
export function adjusted(control: CovariateArm, variant: CovariateArm): Adjusted | Absent {
  haveOneMeasure(control, variant);
  const least = Math.min(control.value.n, variant.value.n);
  if (least < 2) return { absent: least === 0 ? "no-units" : "few-units" };
  if (isConstant(control.value) && isConstant(variant.value)) return { absent: "zero-variance" };
  const centre = centreOf([control, variant]);
  if (centre.count === 0n) return { absent: "no-covariate" };

  const [c, t] = [secondMoments(control, centre), secondMoments(variant, centre)];
  const slope = slopeOf(c, t);
  if (slope === null) return { absent: "same-covariate" };
  const scales = { y: powerOfTwo(control.value.scale), x: powerOfTwo(control.covariate.scale) };
  const unexplained = { control: residual(c, slope), variant: residual(t, slope) };
  if (unexplained.control === null || unexplained.variant === null) return { absent: "lost-digits" };

  const [perControl, perVariant] = [c.n * c.n * (c.n - 1n), t.n * t.n * (t.n - 1n)];
  const left = unexplained.control * perVariant + unexplained.variant * perControl;
  const all = (c.yy.value * perVariant + t.yy.value * perControl) * slope.denominator ** 2n;
  return {
    theta: nearestNumber(
      fraction(
        slope.numerator * centre.count * scales.y.numerator * scales.x.denominator,
        slope.denominator * scales.y.denominator * scales.x.numerator,
      ),
    ),
    centre: centreInUnits(control, variant),
    control: levelOf(control.value, c, slope, unexplained.control, scales.y),
    variant: levelOf(variant.value, t, slope, unexplained.variant, scales.y),
    varianceReduction: nearestNumber(fraction(all - left, all)),
    withoutCovariate: {
      control: control.value.n - control.covariate.n,
      variant: variant.value.n - variant.covariate.n,
    },
  };
}

/** What a contrast was adjusted by: the slope, and the centre of x over its whole arms. */
export interface AdjustedBy {
  readonly theta: number;
  readonly whole: { readonly control: CovariateArm; readonly variant: CovariateArm };
}

/**
 * The level of some of an arm's units by the slope and the centre of the whole contrast: what the units of a level or of the
 * first days give to it.
 *
 *   level = mean(y) - theta (mean(x) - X)    v = (var(y) - 2 theta cov + theta^2 var(x)) / n,   x missing at X
 * @param part by the pivots and scales of the whole arms
 * @returns `no-units`; v absent as `few-units` for one unit, `lost-digits` where y is theta x but for rounding
 */
export function adjustedPart(part: CovariateArm, { theta, whole }: AdjustedBy): Level | Absent {
  haveOneMeasure(part, whole.control);
  const { value, covariate } = part;
  if (value.n === 0) return { absent: "no-units" };
  const centre = centreOf([whole.control, whole.variant]);
  const m = secondMoments(part, centre);
  const [y, x, by] = [powerOfTwo(value.scale), powerOfTwo(covariate.scale), exactly(theta)];
  const slope = fraction(
    by.numerator * x.numerator * y.denominator,
    by.denominator * x.denominator * y.numerator * centre.count,
  );
  const isConstant = m.yy.value === 0n && m.xx.value === 0n;
  const left = value.n < 2 ? null : isConstant ? 0n : residual(m, slope);
  const exact = meanOf(value, m, slope, y);
  const variance: Level["variance"] =
    left === null ? { absent: value.n < 2 ? "few-units" : "lost-digits" } : varianceOf(m, slope, left, y);
  return { n: value.n, exact, value: nearestNumber(exact), variance };
}

/** theta in the units of the sums: (xy_c / d_c + xy_t / d_t) / (xx_c / d_c + xx_t / d_t), d = n^2 (n - 1). Null without spread. */
function slopeOf(c: SecondMoments, t: SecondMoments): Fraction | null {
  const [perControl, perVariant] = [c.n * c.n * (c.n - 1n), t.n * t.n * (t.n - 1n)];
  const together = (ofControl: bigint, ofVariant: bigint) => ofControl * perVariant + ofVariant * perControl;
  const spread = together(c.xx.value, t.xx.value);
  if (spread <= together(c.xx.bound, t.xx.bound)) return null;
  return fraction(together(c.xy.value, t.xy.value), spread);
}

/** n (n - 1) var(y - theta x), times the slope's denominator squared; null where not above what rounding can do. */
function residual({ yy, xy, xx }: SecondMoments, { numerator, denominator }: Fraction): bigint | null {
  const size = numerator < 0n ? -numerator : numerator;
  const of = (part: keyof Bounded, sign: bigint, slope: bigint) =>
    yy[part] * denominator ** 2n + sign * 2n * xy[part] * slope * denominator + xx[part] * slope ** 2n;
  const found = of("value", -1n, numerator);
  return found > of("bound", 1n, size) ? found : null;
}

function levelOf(value: PowerSums, m: SecondMoments, slope: Fraction, left: bigint, scale: Fraction): Level {
  const exact = meanOf(value, m, slope, scale);
  return { n: value.n, exact, value: nearestNumber(exact), variance: varianceOf(m, slope, left, scale) };
}

function meanOf(value: PowerSums, m: SecondMoments, slope: Fraction, scale: Fraction): Fraction {
  if (value.total === null) throw new Error("a mean came without its exact total");
  // mean(y) - slope (off / n) scale 2^-120, over one denominator
  const down = slope.denominator * scale.denominator * ONE;
  return fraction(value.total * down - slope.numerator * m.off * scale.numerator * NANO, m.n * NANO * down);
}

function varianceOf(m: SecondMoments, slope: Fraction, left: bigint, scale: Fraction): number {
  const down = m.n * m.n * (m.n - 1n) * (slope.denominator * scale.denominator * ONE) ** 2n;
  return nearestNumber(fraction(left * scale.numerator ** 2n, down));
}

/** X from the exact totals. */
function centreInUnits(control: CovariateArm, variant: CovariateArm): number {
  const total = (control.covariate.total ?? 0n) + (variant.covariate.total ?? 0n);
  return nearestNumber(fraction(total, BigInt(control.covariate.n + variant.covariate.n) * NANO));
}

function powerOfTwo(scale: number): Fraction {
  return scale >= 1 ? fraction(BigInt(scale), 1n) : fraction(1n, BigInt(1 / scale));
}

/** Sums of several groups can only be taken together by one pivot and scale. */
function haveOneMeasure(control: CovariateArm, variant: CovariateArm): void {
  const [c, t] = [control, variant]
    .flatMap(({ value, covariate, joint }) => [
      [value.pivot, covariate.pivot, value.scale, covariate.scale].join(" "),
      [...joint.pivots, ...joint.scales].join(" "),
    ])
    .filter((measure, i, all) => all.indexOf(measure) === i);
  if (t !== undefined) throw new Error(`sums by ${c} together with sums by ${t}`);
}

function isConstant({ smallest, largest }: PowerSums): boolean {
  return smallest === largest;
}
