import type { CellTable, JointTable, MetricCells, Reduction } from "../../src/engine/types.ts";
import { nanoOf, type Repeated, repeatedTogether } from "../stats/arms.ts";

/** A covariate's values, each with how many units have it, by variant. */
export type ByVariantValues = readonly (readonly Repeated[])[];

/** The reduction with covariates of its metrics, in their order; null for a metric that has none. All units have a value. */
export function withCovariates(reduction: Reduction, values: readonly (ByVariantValues | null)[]): Reduction {
  const metrics = reduction.metrics.map((metric, m): MetricCells => {
    const own = values[m] ?? null;
    return own === null
      ? metric
      : { ...metric, of: cellTable(own), covariate: { x: cellTable(own), joint: pairs(own) } };
  });
  return { ...reduction, metrics };
}

function cellTable(groups: ByVariantValues): CellTable {
  const sums = repeatedTogether(groups);
  const high = (k: 0 | 1 | 2 | 3) => sums.map(({ powers }) => powers[k] >> 60n);
  const low = (k: 0 | 1 | 2 | 3) => sums.map(({ powers }) => powers[k] & (2n ** 60n - 1n));
  return {
    pivot: sums[0]?.pivot ?? "0",
    scale: sums[0]?.scale ?? 1,
    variant: groups.map((_, v) => v),
    bucket: groups.map(() => 0),
    n: sums.map(({ n }) => n),
    high1: high(0),
    high2: high(1),
    high3: high(2),
    high4: high(3),
    low1: low(0),
    low2: low(1),
    low3: low(2),
    low4: low(3),
    total: sums.map(({ total }) => total ?? 0n),
    smallest: sums.map(({ smallest }) => nanoOf(smallest ?? 0)),
    largest: sums.map(({ largest }) => nanoOf(largest ?? 0)),
  };
}

/** The covariate together with itself: as y and as x. */
function pairs(groups: ByVariantValues): JointTable {
  const { pivot, scale, variant, bucket, n, high1, high2, low1, low2, total } = cellTable(groups);
  return {
    pivots: [pivot, pivot],
    scales: [scale, scale],
    variant,
    bucket,
    n,
    high10: high1,
    high01: high1,
    high20: high2,
    high11: high2,
    high02: high2,
    low10: low1,
    low01: low1,
    low20: low2,
    low11: low2,
    low02: low2,
    totalY: total,
    totalX: total,
  };
}
