import type { CovariateArm, PowerSums } from "../cells/types.ts";
import { sumBounds } from "./rounding.ts";

/** One in the units of a power sum. */
export const ONE = 1n << 120n;

/**
 * Centre of x over both arms: the whole number `sum` over `count`, in units of 2^-120 of x's scale from its pivot. So that
 * all stays whole, x is counted in units of 1 / count from here on.
 */
export interface Centre {
  readonly sum: bigint;
  readonly count: bigint;
}

export function centreOf(arms: readonly CovariateArm[]): Centre {
  return {
    sum: arms.reduce((sum, { covariate }) => sum + covariate.powers[0], 0n),
    count: arms.reduce((count, { covariate }) => count + BigInt(covariate.n), 0n),
  };
}

/**
 * Second moments of one arm about its means, a missing x put at the centre; times n (n - 1), y in units of 2^-120 of its
 * scale, x in units of 2^-120 / count of its own. With each how far it can be off by the rounding of its sums.
 */
export interface SecondMoments {
  readonly n: bigint;
  /** n (n - 1) var(y) */
  readonly yy: Bounded;
  /** n (n - 1) cov(x, y) */
  readonly xy: Bounded;
  /** n (n - 1) var(x) */
  readonly xx: Bounded;
  /** n times the mean of x less n times the centre. */
  readonly off: bigint;
}

export interface Bounded {
  readonly value: bigint;
  readonly bound: bigint;
}

interface Sums {
  readonly y: bigint;
  readonly yThere: bigint;
  readonly x: bigint;
  readonly yy: bigint;
  readonly xy: bigint;
  readonly xx: bigint;
}

/**
 *   sum x' = S_01 K + m P    sum x' y = S_11 K + P (S_10 - S_10 where x is there)    sum x'^2 = S_02 K^2 + m P^2
 * with the centre P / K and m units without x; n (n - 1) cov = n sum x' y - sum x' sum y, and so on.
 */
export function secondMoments(arm: CovariateArm, centre: Centre): SecondMoments {
  const { value, covariate, joint } = arm;
  if (joint.n !== covariate.n || covariate.n > value.n)
    throw new Error(`${joint.n} pairs and ${covariate.n} covariates for ${value.n} values`);
  const sums: Sums = {
    y: value.powers[0],
    yThere: joint.s10,
    x: covariate.powers[0],
    yy: value.powers[1],
    xy: joint.s11,
    xx: covariate.powers[1],
  };
  const [n, missing] = [BigInt(value.n), BigInt(value.n - covariate.n)];
  const found = products(sums, n, missing, centre, -1n);
  // The polynomials with all signs positive: how much they can move when each sum moves by its bound.
  const sizes = each(sums, (sum) => (sum < 0n ? -sum : sum));
  const bounds = boundsOf(arm);
  const size = { sum: centre.sum < 0n ? -centre.sum : centre.sum, count: centre.count };
  const least = products(sizes, n, missing, size, 1n);
  const most = products(
    each(sizes, (sum, part) => sum + bounds[part]),
    n,
    missing,
    size,
    1n,
  );
  const bounded = (part: "yy" | "xy" | "xx") => ({ value: found[part], bound: most[part] - least[part] });
  return {
    n,
    yy: bounded("yy"),
    xy: bounded("xy"),
    xx: bounded("xx"),
    off: sums.x * centre.count - BigInt(covariate.n) * centre.sum,
  };
}

/** `minus` is -1 for the moments, 1 for their bounds. */
function products(s: Sums, n: bigint, missing: bigint, { sum, count }: Centre, minus: -1n | 1n) {
  const x = s.x * count + missing * sum;
  return {
    yy: n * ONE * s.yy + minus * s.y * s.y,
    xy: n * (ONE * count * s.xy + sum * (s.y + minus * s.yThere)) + minus * s.y * x,
    xx: n * (ONE * count * count * s.xx + missing * sum * sum) + minus * x * x,
  };
}

/**
 * How far each sum can be off. A product of u and w is rounded three times: 3 eps sum |u w|, by Cauchy's inequality at
 * most 3 eps sqrt(S_20 S_02), and 2^-113 a unit for the split in two integers (rounding.ts).
 */
function boundsOf({ value, covariate, joint }: CovariateArm): Sums {
  const [y, yy] = sumBounds(value, 0);
  const [x, xx] = sumBounds(covariate, 0);
  const inBoth: PowerSums = { ...covariate, powers: [joint.s10, joint.s20, 0n, 0n] };
  const [yThere] = sumBounds(inBoth, 0);
  const product = Math.sqrt(Number(joint.s20)) * Math.sqrt(Number(joint.s02));
  const xy = BigInt(Math.ceil((3 * 2 ** -53 * product + joint.n * 2 ** 7) * (1 + 2 ** -30)));
  return { y, yThere, x, yy, xy, xx };
}

function each(sums: Sums, change: (sum: bigint, part: keyof Sums) => bigint): Sums {
  return {
    y: change(sums.y, "y"),
    yThere: change(sums.yThere, "yThere"),
    x: change(sums.x, "x"),
    yy: change(sums.yy, "yy"),
    xy: change(sums.xy, "xy"),
    xx: change(sums.xx, "xx"),
  };
}
