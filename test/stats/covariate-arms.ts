import type { JointSums, PowerSums } from "../../src/cells/types.ts";
import type { Adjustment, CovariateArm } from "../../src/stats/index.ts";
import { nanoOf, sumsTogether } from "./arms.ts";

/** A unit's y, and its x where it has one. */
export type Pair = readonly [y: number, x: number | null];

/** The arms of a contrast with their joint sums, written from DESIGN 5 and without the engine. */
export function covariateArms(groups: readonly (readonly Pair[])[]): CovariateArm[] {
  const having = groups.map((pairs) => pairs.flatMap(([y, x]) => (x === null ? [] : [{ y, x }])));
  const ys = sumsTogether(groups.map((pairs) => pairs.map(([y]) => y)));
  const xs = sumsTogether(having.map((pairs) => pairs.map(({ x }) => x)));
  return groups.map((_, i) => {
    const [y, x, pairs] = [ys[i], xs[i], having[i]];
    if (y === undefined || x === undefined || pairs === undefined) throw new Error("a group without sums");
    return { y, x, joint: jointOf(pairs, y, x) };
  });
}

function jointOf(pairs: readonly { readonly y: number; readonly x: number }[], y: PowerSums, x: PowerSums): JointSums {
  const us = pairs.map((pair) => [unit(pair.y, y), unit(pair.x, x)] as const);
  const sum = (term: (u: number, w: number) => number) =>
    us.reduce((total, [u, w]) => total + inTwoIntegers(term(u, w)), 0n);
  return {
    n: pairs.length,
    pivots: [y.pivot, x.pivot],
    scales: [y.scale, x.scale],
    s10: sum((u) => u),
    s01: sum((_, w) => w),
    s20: sum((u) => u * u),
    s11: sum((u, w) => u * w),
    s02: sum((_, w) => w * w),
    totalY: pairs.reduce((total, pair) => total + nanoOf(pair.y), 0n),
    totalX: pairs.reduce((total, pair) => total + nanoOf(pair.x), 0n),
  };
}

/** The sums of y - theta (x - X), as an engine computes them: d = (y - pivot) - theta ((x - pivot) - (X - pivot)). */
export function adjustedValues(
  groups: readonly (readonly Pair[])[],
  { y, x }: CovariateArm,
  by: Adjustment,
): PowerSums[] {
  const values = groups.map((pairs) =>
    pairs.map(([own, covariate]) => {
      const centred = covariate === null ? 0 : less(covariate, x.pivot) - by.fromPivot;
      return less(own, y.pivot) - by.theta * centred;
    }),
  );
  const reach = Math.max(...values.flat().map(Math.abs));
  const scale = reach === 0 ? 1 : 2 ** Math.ceil(Math.log2(reach));
  return values.map((ds) => ({
    n: ds.length,
    pivot: y.pivot,
    scale,
    powers: [1, 2, 3, 4].map((k) =>
      ds.reduce(
        (total, d) =>
          total +
          inTwoIntegers(
            Array(k)
              .fill(d / scale)
              .reduce((a, b) => a * b),
          ),
        0n,
      ),
    ) as unknown as PowerSums["powers"],
    total: null,
    smallest: Number(y.pivot) + Math.min(...ds),
    largest: Number(y.pivot) + Math.max(...ds),
  }));
}

const unit = (value: number, { pivot, scale }: PowerSums) => less(value, pivot) / scale;

/** The exact difference of two decimals, rounded once. */
function less(value: number, pivot: string): number {
  return Number(nanoOf(value) - nanoOf(Number(pivot))) / 1e9;
}

function inTwoIntegers(term: number): bigint {
  const t = term * 2 ** 60;
  const high = Math.floor(t);
  return (BigInt(high) << 60n) + BigInt(Math.floor((t - high) * 2 ** 60 + 0.5));
}
