import type { BucketCells } from "../cells/types.ts";
import type { Counts } from "./share.ts";

/** Draws or deals for a contrast that decides, and for one that does not. */
export const DRAWS = 4000;
export const DRAWS_OF_SECONDARY = 1000;

/** Fewer units, or successes or failures of a proportion, in an arm: not drawn (METHODS 3). */
const UNITS_AT_LEAST = 20;
const EVENTS_AT_LEAST = 10;
/** More undefined draws than this share: not shown. */
const UNDEFINED_OVER = 0.01;

/** Why nothing was drawn, or what was drawn is not shown. */
export interface NotDrawn {
  readonly notDrawn: "few-units" | "few-events" | "no-spread" | "undefined-draws" | "no-buckets";
}

export function isNotDrawn<Drawn>(found: Drawn | NotDrawn): found is NotDrawn {
  return typeof found === "object" && found !== null && "notDrawn" in found;
}

/** Why a contrast is not drawn at all; null where it is. `shares` are the counts of a proportion, else null. */
export function tooFew(
  cells: BucketCells,
  shares: { readonly control: Counts; readonly variant: Counts } | null,
): NotDrawn | null {
  const units = [cells.control.n, cells.variant.n].map((n) => n.reduce((sum, m) => sum + m, 0));
  if (Math.min(...units) < UNITS_AT_LEAST) return { notDrawn: "few-units" };
  const events = shares === null ? [] : [shares.control, shares.variant];
  const fewest = Math.min(...events.flatMap(({ successes, n }) => [successes, n - successes]));
  return fewest < EVENTS_AT_LEAST ? { notDrawn: "few-events" } : null;
}

/** Whether so many draws reach the tails of an interval: an early look's boundary can lie beyond all of them. */
export function drawsReach(alpha: number, draws: number): boolean {
  return alpha * draws >= 4;
}

/** Whether too many of the draws had no T. */
export function tooManyUndefined(undefinedDraws: number, draws: number): boolean {
  return undefinedDraws > UNDEFINED_OVER * draws;
}
