import { fraction, NANO, nearestNumber } from "../cells/index.ts";
import type { Arm } from "../cells/types.ts";
import { type QuantileContrast, quantileContrast } from "./quantile.ts";
import { quantileRanks } from "./quantile-ranks.ts";
import { answered, type RankSearch } from "./rank-search.ts";
import type { Absent, Level } from "./types.ts";

/** An arm of a quantile, with the order statistics that were asked for. */
export type QuantileArm = Extract<Arm, { readonly kind: "quantile" }>;

/** The search for all that the contrast of two arms needs of their units, at a critical value on the normal's scale. */
export function quantileSearch(
  control: QuantileArm,
  variant: QuantileArm,
  critical: number,
): RankSearch<QuantileContrast> {
  if (control.q !== variant.q) throw new Error(`the quantile ${variant.q} against the quantile ${control.q}`);
  return quantileContrast({ control: control.sums.n, variant: variant.sums.n }, control.q, critical);
}

/** The contrast of two arms that hold every order statistic that `quantileSearch` asks for. */
export function quantilesCompared(control: QuantileArm, variant: QuantileArm, critical: number): QuantileContrast {
  return answered(quantileSearch(control, variant, critical), (asked) => ({
    control: asked.control.map((rank) => valueAt(control, rank)),
    variant: asked.variant.map((rank) => valueAt(variant, rank)),
  }));
}

/** The quantile itself: it has a level and, without an estimate of the density at it, no variance. */
export function quantileLevel(arm: QuantileArm): Level | Absent {
  const { n } = arm.sums;
  if (n === 0) return { absent: "no-units" };
  const exact = fraction(valueAt(arm, quantileRanks(n, arm.q, 0).at), NANO);
  return { n, exact, value: nearestNumber(exact), variance: { absent: "not-for-quantiles" } };
}

function valueAt({ ordered, sums }: QuantileArm, rank: number): bigint {
  const value = ordered.get(rank);
  if (value === undefined) throw new Error(`rank ${rank} of ${sums.n} was not asked for: ${ordered.size} are known`);
  return value;
}
