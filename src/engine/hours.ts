import type { HourOfLog } from "./soundnessTypes.ts";

/** Rows by hour of the epoch, and a run of hours in which one arm has none while others have. */

export interface HourCount {
  readonly source: number;
  readonly hour: number;
  readonly rows: number;
}
export type ArmHour = HourCount & { readonly variant: number };
/** Rows of enrolled units; the place of those that belong to analysed units and that no line of the row ledger took. */
export type RowsOfUnits = ArmHour & { readonly place: number | null };

export interface SilentRun {
  readonly source: number;
  readonly variant: number;
  /** Hours of the epoch, both inclusive. */
  readonly first: number;
  readonly last: number;
  /** Rows of the other variants. */
  readonly rows: number;
}

/** Every hour of a span, also those without rows, by the clock of the plan. */
export function hoursOfSpan(
  counts: readonly HourCount[],
  arms: readonly ArmHour[],
  variants: number,
  firstHour: number,
  lastHour: number,
  clock: (hour: number) => { readonly day: number; readonly hour: number },
): HourOfLog[] {
  const rows = new Map(counts.map((count) => [count.hour, count.rows]));
  const byVariant = new Map<number, number[]>();
  for (const { hour, variant, rows: own } of arms) {
    const counted = byVariant.get(hour) ?? new Array<number>(variants).fill(0);
    counted[variant] = own;
    byVariant.set(hour, counted);
  }
  const none = new Array<number>(variants).fill(0);
  return Array.from({ length: lastHour - firstHour + 1 }, (_, i) => ({
    ...clock(firstHour + i),
    rows: rows.get(firstHour + i) ?? 0,
    byVariant: byVariant.get(firstHour + i) ?? none,
  }));
}

/**
 * Of one entry of the log: the longest runs, one after the other of the hours with rows of enrolled units, in which an arm
 * that has rows in it at all has none. Those with most rows of others first.
 */
export function silentRuns(hours: readonly ArmHour[]): SilentRun[] {
  const arms = [...new Set(hours.map(({ variant }) => variant))];
  const byHour = new Map<number, ArmHour[]>();
  for (const one of hours) byHour.set(one.hour, [...(byHour.get(one.hour) ?? []), one]);
  const ordered = [...byHour].sort(([a], [b]) => a - b);
  return arms.flatMap((variant) => runsWithout(variant, ordered)).sort(byRows);
}

function runsWithout(variant: number, ordered: readonly (readonly [number, readonly ArmHour[]])[]): SilentRun[] {
  const runs: { source: number; variant: number; first: number; last: number; rows: number }[] = [];
  let wasSilent = false;
  for (const [hour, arms] of ordered) {
    const isSilent = !arms.some((arm) => arm.variant === variant);
    const rows = arms.reduce((sum, arm) => sum + arm.rows, 0);
    const run = runs.at(-1);
    if (isSilent && wasSilent && run !== undefined) {
      run.last = hour;
      run.rows += rows;
    } else if (isSilent) {
      runs.push({ source: arms[0]?.source ?? 0, variant, first: hour, last: hour, rows });
    }
    wasSilent = isSilent;
  }
  return runs;
}

/** Equal ones by place, so that the order never leans on the engine's. */
export const byRows = (a: SilentRun, b: SilentRun): number =>
  b.rows - a.rows || a.source - b.source || a.variant - b.variant || a.first - b.first;
