import { fraction, NANO, nearestNumber } from "../cells/index.ts";
import { type OrderedArm, reach } from "./order-statistics.ts";
import { quantileP } from "./quantile-p.ts";
import { quantileRanks, type Ranks } from "./quantile-ranks.ts";
import { quantileRelative } from "./quantile-relative.ts";
import { type Known, learn, type RankSearch } from "./rank-search.ts";
import type { Absent, Difference, Relative } from "./types.ts";

/** A quantile of two arms compared, as `Contrast` has it of levels with a variance. */
export interface QuantileContrast {
  /** The quantile of each arm, in the metric's unit; null without units. */
  readonly control: number | null;
  readonly variant: number | null;
  readonly difference: Difference;
  readonly relative: Relative | Absent;
  readonly critical: number;
  readonly why: Absent | null;
}

/**
 * Difference of one quantile between two arms, its interval from the order statistics of each arm (MOVER).
 *
 *   Q the ceil(n q)-th smallest value, [l, u] at ranks floor(n q - z h) and ceil(n q + z h), h = sqrt(n q (1 - q))
 *   D = Q_t - Q_c    low = D - sqrt((Q_t - l_t)^2 + (u_c - Q_c)^2)    high = D + sqrt((u_t - Q_t)^2 + (Q_c - l_c)^2)
 * An end that needs a rank outside 1..n is null. No density is estimated, so ties and gaps do no harm: whole numbers make
 * the interval wider than asked, not narrower. Relative by MOVER for a ratio; p: the alpha at which an end touches 0.
 * @param units with a value
 * @param q as `quantileRanks` takes it
 * @param critical above 0, on the normal's scale, of one contrast or of several at once: low and high are held at it, and p
 *   is of this contrast alone
 * @returns no standard error and no z, they do not exist. `no-units`; `few-for-rank` where neither end exists; `no-width`
 *   where all of l, Q and u agree in each arm: such an interval would claim to know the difference exactly
 *
 * Source: Conover 1999, Practical Nonparametric Statistics, 3rd ed., 3.2; Zou and Donner 2008, Statistics in Medicine 27,
 * 1693-1702, eq. 2.
 */
export function* quantileContrast(
  units: { readonly control: number; readonly variant: number },
  q: string,
  critical: number,
): RankSearch<QuantileContrast> {
  const known: Known = { control: new Map(), variant: new Map() };
  const ranks = {
    control: units.control === 0 ? null : quantileRanks(units.control, q, critical),
    variant: units.variant === 0 ? null : quantileRanks(units.variant, q, critical),
  };
  yield* learn(known, { control: wanted(ranks.control), variant: wanted(ranks.variant) });
  const [c, t] = [ordered(known.control, ranks.control), ordered(known.variant, ranks.variant)];
  if (c === null || t === null) {
    const why: Absent = { absent: "no-units" };
    return { ...levels(c, t), difference: nothing(null), relative: why, critical, why };
  }

  const estimate = t.at - c.at;
  if (isPoint(c) && isPoint(t)) {
    const why: Absent = { absent: "no-width" };
    return { ...levels(c, t), difference: nothing(nano(estimate)), relative: why, critical, why };
  }
  const down = reach(t, c, estimate);
  const up = reach(c, t, estimate);
  return {
    ...levels(c, t),
    difference: {
      ...nothing(nano(estimate)),
      low: down === null ? null : nano(estimate) - down,
      high: up === null ? null : nano(estimate) + up,
      p: yield* quantileP(units, q, estimate, known),
    },
    relative: quantileRelative(c, t),
    critical,
    why: down === null && up === null ? { absent: "few-for-rank" } : null,
  };
}

function wanted(ranks: Ranks | null): number[] {
  return ranks === null ? [] : [ranks.at, ranks.low, ranks.high].filter((rank) => rank !== null);
}

function ordered(values: ReadonlyMap<number, bigint>, ranks: Ranks | null): OrderedArm | null {
  if (ranks === null) return null;
  const at = (rank: number | null) => (rank === null ? null : (values.get(rank) ?? null));
  const quantile = at(ranks.at);
  if (quantile === null) throw new Error(`no value at rank ${ranks.at}`);
  return { at: quantile, low: at(ranks.low), high: at(ranks.high) };
}

function isPoint({ at, low, high }: OrderedArm): boolean {
  return low === at && high === at;
}

function levels(c: OrderedArm | null, t: OrderedArm | null) {
  return { control: c === null ? null : nano(c.at), variant: t === null ? null : nano(t.at) };
}

function nothing(estimate: number | null): Difference {
  return { estimate, standardError: null, low: null, high: null, z: null, p: null, method: "quantile" };
}

function nano(value: bigint): number {
  return nearestNumber(fraction(value, NANO));
}
