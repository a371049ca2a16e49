import type { Part, Plan } from "../../src/plan/types.ts";
import { ascending } from "./number.ts";
import type { Row } from "./types.ts";
import { holds } from "./where.ts";

export const DAY_US = 86_400_000_000n;
const LONGEST_GAP_US = 7n * DAY_US;

export interface Span {
  readonly first: bigint;
  readonly last: bigint;
  readonly rows: number;
}

/** Whether a part counts a row, as far as the row itself goes. */
export function partMatches(part: Part, row: Row): boolean {
  return (part.event === null || row.event === part.event) && holds(part.where, row.cell);
}

/** The parts of all metrics: `of`, and `per` where there is one. */
export function partsOf(plan: Plan): readonly Part[] {
  return plan.metrics.flatMap(({ of, per }) => (per === null ? [of] : [of, per]));
}

/** Rule 7: the earliest end of the spans of the sources that hold a row some metric matches; of all if none does. */
export function logEnd(plan: Plan, rows: readonly Row[]): bigint | null {
  const kept = rows.filter((row) => row.rejected === null);
  const all = [...new Set(kept.map((row) => row.source))];
  const measured = [
    ...new Set(kept.filter((row) => partsOf(plan).some((part) => partMatches(part, row))).map((row) => row.source)),
  ];
  const ends = (measured.length > 0 ? measured : all).flatMap((source) => {
    const span = spanOf(kept.filter((row) => row.source === source));
    return span === null ? [] : [span.last];
  });
  return ends.reduce<bigint | null>((earliest, end) => (earliest === null || end < earliest ? end : earliest), null);
}

/** The run without a gap of more than 7 days that holds most rows; of runs with equally many the later. */
export function spanOf(rows: readonly Row[]): Span | null {
  return runsOf(rows).reduce<Span | null>((best, run) => (best === null || run.rows >= best.rows ? run : best), null);
}

/** All runs, earliest first. */
export function runsOf(rows: readonly Row[]): readonly Span[] {
  const times = rows.flatMap(({ us }) => (us === null ? [] : [us])).sort(ascending);
  const runs: Span[] = [];
  for (const time of times) {
    const run = runs.at(-1);
    if (run !== undefined && time - run.last <= LONGEST_GAP_US) {
      runs[runs.length - 1] = { first: run.first, last: time, rows: run.rows + 1 };
    } else {
      runs.push({ first: time, last: time, rows: 1 });
    }
  }
  return runs;
}
