import type { CovariateArm, PowerSums } from "../../src/cells/types.ts";
import { nanoOf } from "./arms.ts";
import type { Pairs } from "./pairs.ts";

/** The sums of y - theta (x - X), computed as an engine does: d = (y - pivot) - theta ((x - pivot) - (X - pivot)). */
export function adjustedValues(
  groups: readonly Pairs[],
  { value, covariate }: CovariateArm,
  theta: number,
  meanFromPivot: number,
): PowerSums[] {
  const values = groups.map((pairs) =>
    pairs.map(([y, x]) => less(y, value.pivot) - theta * (x === null ? 0 : less(x, covariate.pivot) - meanFromPivot)),
  );
  const reach = Math.max(...values.flat().map(Math.abs));
  const scale = reach === 0 ? 1 : 2 ** Math.ceil(Math.log2(reach));
  return values.map((ds) => ({
    n: ds.length,
    pivot: value.pivot,
    scale,
    powers: [sumOf(ds, scale, 1), sumOf(ds, scale, 2), sumOf(ds, scale, 3), sumOf(ds, scale, 4)],
    total: null,
    smallest: Number(value.pivot) + Math.min(...ds),
    largest: Number(value.pivot) + Math.max(...ds),
  }));
}

function sumOf(ds: readonly number[], scale: number, k: number): bigint {
  return ds.reduce((total, d) => {
    const t = Array.from({ length: k }, () => d / scale).reduce((a, b) => a * b) * 2 ** 60;
    const high = Math.floor(t);
    return total + (BigInt(high) << 60n) + BigInt(Math.floor((t - high) * 2 ** 60 + 0.5));
  }, 0n);
}

/** The difference of two decimals, exact but for the last rounding. */
function less(value: number, pivot: string): number {
  return Number(nanoOf(value) - nanoOf(Number(pivot))) / 1e9;
}
