import type { PowerSums } from "./types.ts";

/** A unit of decimals in the engine's tables, 10^-9 of the metric's unit, as a divisor. */
export const NANO = 1_000_000_000n;

/** Exact decimal text of up to 9 places, such as a pivot, in 10^-9. */
export function nanoOf(text: string): bigint {
  const [whole = "", places = ""] = text.split(".");
  if (!/^-?\d+$/.test(whole) || !/^\d{0,9}$/.test(places)) throw new Error(`${text} is no decimal of up to 9 places`);
  return BigInt(whole + places.padEnd(9, "0"));
}

/** The sums of one kind of cells over some rows, as the roll-up gives them. */
export interface SumsRow {
  readonly n: number;
  readonly high1: bigint;
  readonly high2: bigint;
  readonly high3: bigint;
  readonly high4: bigint;
  readonly low1: bigint;
  readonly low2: bigint;
  readonly low3: bigint;
  readonly low4: bigint;
}

/** S_1..S_4 in units of 2^-120: S_k = sum(high_k) 2^-60 + sum(low_k) 2^-120 (DESIGN 5). */
export function powers(row: SumsRow): PowerSums["powers"] {
  return [
    joined(row.high1, row.low1),
    joined(row.high2, row.low2),
    joined(row.high3, row.low3),
    joined(row.high4, row.low4),
  ];
}

/** high 2^-60 + low 2^-120, in units of 2^-120. */
export function joined(high: bigint, low: bigint): bigint {
  return (high << 60n) + low;
}

/** The sums of no unit at all. */
export function noUnits(pivot: string, scale: number, total: bigint | null): PowerSums {
  return { n: 0, pivot, scale, powers: [0n, 0n, 0n, 0n], total, smallest: null, largest: null };
}
