import type { BucketCells, BucketSums, PairSums } from "../cells/types.ts";

/**
 * What a contrast compares of each unit, as sums by bucket: the value itself; a ratio's score (y - R x) / mean(x) + R, R and
 * mean(x) of the arm; an adjusted value y - theta x, theta of the contrast. Both arms with one pivot and scale.
 * @returns null where a ratio's or the slope's denominator is 0
 */
export function bucketScores(
  cells: BucketCells,
): { readonly control: BucketSums; readonly variant: BucketSums } | null {
  if (cells.kind === "mean") return cells;
  const { control, variant } = cells;
  if (cells.kind === "adjusted") {
    const theta = slope(control, variant);
    return Number.isFinite(theta)
      ? { control: linear(control, 0, 1, -theta), variant: linear(variant, 0, 1, -theta) }
      : null;
  }
  const score = (arm: PairSums) => {
    const [n, y, x] = [total(arm.n), total(arm.y), total(arm.x)];
    const [sumY, sumX] = [n * cells.pivots[0] + cells.scales[0] * y, n * cells.pivots[1] + cells.scales[1] * x];
    if (n === 0 || sumX === 0) return null;
    const [ratio, mean] = [sumY / sumX, sumX / n];
    const constant = (cells.pivots[0] - ratio * cells.pivots[1]) / mean + ratio;
    return linear(arm, constant, cells.scales[0] / mean, (-ratio * cells.scales[1]) / mean);
  };
  const [ofControl, ofVariant] = [score(control), score(variant)];
  return ofControl === null || ofVariant === null ? null : { control: ofControl, variant: ofVariant };
}

/** theta of METHODS 1 in the units of the sums. */
function slope(control: PairSums, variant: PairSums): number {
  const part = (arm: PairSums) => {
    const [n, y, x] = [total(arm.n), total(arm.y), total(arm.x)];
    return [(total(arm.yx) - (y * x) / n) / ((n - 1) * n), (total(arm.xx) - (x * x) / n) / ((n - 1) * n)] as const;
  };
  const [[covControl, varControl], [covVariant, varVariant]] = [part(control), part(variant)];
  return (covControl + covVariant) / (varControl + varVariant);
}

/** Sums of k + a u + b w of each unit, u and w what the pair's sums are of. */
function linear({ n, y, x, yy, yx, xx }: PairSums, k: number, a: number, b: number): BucketSums {
  const at = (values: Float64Array, i: number) => values[i] ?? 0;
  return {
    n,
    s1: n.map((units, i) => k * units + a * at(y, i) + b * at(x, i)),
    s2: n.map((units, i) => {
      const squares = a * a * at(yy, i) + 2 * a * b * at(yx, i) + b * b * at(xx, i);
      return k * k * units + 2 * k * (a * at(y, i) + b * at(x, i)) + squares;
    }),
  };
}

function total(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value, 0);
}
