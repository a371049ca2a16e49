import { moverRatio } from "./mover.ts";
import { newcombe, reach, shareDifference } from "./newcombe.ts";
import { normalTwoSided } from "./normal.ts";
import type { Counts } from "./share.ts";
import type { Absent, Relative } from "./types.ts";
import { wilson } from "./wilson.ts";

/** Under this many successes or failures in an arm the score interval is the one that counts; the limit is ours. */
const FEW = 10;

/** Whether an arm has fewer than 10 units with the event, or fewer than 10 without it. */
export function hasFewEvents({ successes, n }: Counts): boolean {
  return Math.min(successes, n - successes) < FEW;
}

/** The contrast of two shares by their score intervals: difference, relative and p agree about 0. */
export interface FewEvents {
  readonly estimate: number;
  readonly low: number;
  readonly high: number;
  readonly p: number;
  readonly relative: Relative | Absent;
}

/**
 * Two shares of which an arm has few events: Newcombe's interval, the MOVER interval of the ratio from the same Wilson
 * limits, and the p at which both touch 0.
 * @param z critical value of the interval, above 0; an arm has at least one unit
 *
 * Source: Newcombe 1998, Statistics in Medicine 17, 873-890, method 10; Donner and Zou 2012.
 */
export function fewEvents(control: Counts, variant: Counts, z: number): FewEvents {
  return {
    estimate: shareDifference(control, variant),
    ...newcombe(control, variant, z),
    p: scoreP(control, variant),
    relative: moverRatio(control, variant, z),
  };
}

/**
 * The alpha at which Newcombe's interval touches 0: p = P(|Z| >= z) for the z with |D| = its reach towards 0.
 *
 * The reach grows with z from 0 past |D|, so there is one such z; it is halved down to neighbouring doubles.
 * @returns 1 for D = 0
 */
export function scoreP(control: Counts, variant: Counts): number {
  const estimate = shareDifference(control, variant);
  if (estimate === 0) return 1;
  const [higher, lower] = estimate > 0 ? [variant, control] : [control, variant];
  const misses = (z: number) => reach(wilson(lower, z), wilson(higher, z)) < Math.abs(estimate);

  let high = 1;
  while (misses(high)) high *= 2;
  let low = 0;
  for (let middle = high / 2; middle > low && middle < high; middle = low + (high - low) / 2) {
    if (misses(middle)) low = middle;
    else high = middle;
  }
  return normalTwoSided(high);
}
