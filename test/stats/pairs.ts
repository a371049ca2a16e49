import { fraction, NANO, nearestNumber } from "../../src/cells/index.ts";
import type { CovariateArm, PowerSums } from "../../src/cells/types.ts";
import { sumsTogether } from "./arms.ts";
import { nano } from "./ordered.ts";

/** Units of one arm: y and x; null where a unit has no x. */
export type Pairs = readonly (readonly [y: number, x: number | null])[];

/** The units of an arm whose y and x stand in two lists. */
export function pairsOf({ y, x }: { readonly y: readonly number[]; readonly x: readonly (number | null)[] }): Pairs {
  return y.map((value, i) => [value, x[i] ?? null]);
}

/** Both arms of an adjusted metric: pivots and scales of both together, sums as DESIGN 5 describes them. */
export function covariateArms(control: Pairs, variant: Pairs): [CovariateArm, CovariateArm] {
  const [yc, yt] = sumsTogether([control.map(([y]) => y), variant.map(([y]) => y)]) as [PowerSums, PowerSums];
  const [xc, xt] = sumsTogether([xs(control), xs(variant)]) as [PowerSums, PowerSums];
  return [armOf(control, yc, xc), armOf(variant, yt, xt)];
}

function armOf(pairs: Pairs, value: PowerSums, covariate: PowerSums): CovariateArm {
  const sums = { s10: 0n, s01: 0n, s20: 0n, s11: 0n, s02: 0n };
  const totals: [bigint, bigint] = [0n, 0n];
  for (const [y, x] of pairs) {
    if (x === null) continue;
    const [u, w] = [scaled(y, value), scaled(x, covariate)];
    sums.s10 += term(u);
    sums.s01 += term(w);
    sums.s20 += term(u * u);
    sums.s11 += term(u * w);
    sums.s02 += term(w * w);
    totals[0] += nano(y);
    totals[1] += nano(x);
  }
  return {
    value,
    covariate,
    joint: {
      n: covariate.n,
      pivots: [value.pivot, covariate.pivot],
      scales: [value.scale, covariate.scale],
      ...sums,
      totals,
    },
  };
}

function xs(pairs: Pairs): number[] {
  return pairs.flatMap(([, x]) => (x === null ? [] : [x]));
}

/** The double nearest to the exact difference, over the scale. */
function scaled(value: number, { pivot, scale }: PowerSums): number {
  const [whole = "0", places = ""] = pivot.replace("-", "").split(".");
  const from = BigInt(whole + places.padEnd(9, "0")) * (pivot.startsWith("-") ? -1n : 1n);
  return nearestNumber(fraction(nano(value) - from, NANO)) / scale;
}

/** One term in two whole numbers, in units of 2^-120. */
function term(value: number): bigint {
  const t = value * 2 ** 60;
  const high = Math.floor(t);
  return (BigInt(high) << 60n) + BigInt(Math.floor((t - high) * 2 ** 60 + 0.5));
}
