import type { CheckOutcome } from "./types.ts";

// Arms differ: common practice, strict because it is asked of every test (METHODS 7).
const FAILS_BELOW = 0.001;
const CAUTION_BELOW = 0.01;

// Shares of rows or units, METHODS 7. "Over" is exact: 1 row in 1,000 is not over 0.1%.
const CAUTION_OVER = 0.001;
const WORSE_OVER = 0.01;

/** Share of units not followed to the end, over which the follow-up draws a caution (METHODS 7). */
export const FOLLOW_UP_CAUTION_OVER = 0.1;

/** Share of the enrolled whose enrolling row a metric counts, over which that draws a caution (METHODS 7). */
export const ENROLLED_BY_METRIC_ROWS_OVER = 0.01;

/** What a p-value of "the arms are alike" says. */
export function byP(p: number): CheckOutcome {
  return p < FAILS_BELOW ? "fail" : p < CAUTION_BELOW ? "caution" : "pass";
}

/** The same where a difference between arms is a caution and never fails. */
export function byPAtMostCaution(p: number): "pass" | "caution" {
  return p < CAUTION_BELOW ? "caution" : "pass";
}

/** How much is too much of what should not be there: none, over 0.1%, over 1%. */
export function byShare(share: number): "little" | "much" | "very-much" {
  return share > WORSE_OVER ? "very-much" : share > CAUTION_OVER ? "much" : "little";
}
