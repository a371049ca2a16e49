import { meanLevel } from "../../src/stats/mean.ts";
import type { Level } from "../../src/stats/types.ts";
import { nanoOf, sumsOf } from "./arms.ts";
import { present } from "./expect.ts";

/** The level of units with these values. */
export function levelOf(values: readonly number[]): Level {
  return present(meanLevel(sumsOf(values)));
}

/** The level that a published mean, standard deviation and number of units stand for. */
export function levelFrom(n: number, mean: number, sd: number): Level {
  return { n, exact: { numerator: nanoOf(mean), denominator: 1_000_000_000n }, value: mean, variance: sd ** 2 / n };
}

/** The whole numbers from one to another. */
export function range(from: number, to: number): number[] {
  return Array.from({ length: to - from + 1 }, (_, i) => from + i);
}
