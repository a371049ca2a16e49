import type { Silence, SourceHours } from "../../src/engine/soundnessTypes.ts";
import type { Plan } from "../../src/plan/types.ts";
import type { Ended } from "./soundness.ts";
import { spanOf } from "./span.ts";
import type { Clock } from "./time.ts";
import type { Unit } from "./units.ts";

/** Rows by hour of the epoch, and the runs of hours in which one arm has none (METHODS 7, gaps). */

const HOUR_MS = 3_600_000;
const hourOf = (us: bigint): number => Math.floor(Number(us / 1000n - (us % 1000n < 0n ? 1n : 0n)) / HOUR_MS);

interface ArmRow {
  readonly source: number;
  readonly hour: number;
  readonly unit: string | null;
  readonly variant: number | null;
}

/** Not rejected rows within their source's span, with the variant of their unit where it is enrolled. */
function rowsInSpans(ended: readonly Ended[], enrolled: readonly Unit[]): ArmRow[] {
  const variants = new Map(enrolled.map(({ unit, variant }) => [unit, variant]));
  const kept = ended.filter(({ line }) => line !== "rejected").map(({ row }) => row);
  const spans = new Map(
    [...new Set(kept.map(({ source }) => source))].map((source) => [
      source,
      spanOf(kept.filter((row) => row.source === source)),
    ]),
  );
  return kept.flatMap(({ source, us, unit }) => {
    const span = spans.get(source);
    if (us === null || span == null || hourOf(us) < hourOf(span.first) || hourOf(us) > hourOf(span.last)) return [];
    return [{ source, hour: hourOf(us), unit, variant: variants.get(unit ?? "") ?? null }];
  });
}

export function sourcesOf(plan: Plan, ended: readonly Ended[], enrolled: readonly Unit[], clock: Clock): SourceHours[] {
  const kept = ended.filter(({ line }) => line !== "rejected").map(({ row }) => row);
  const inside = rowsInSpans(ended, enrolled);
  return plan.log.flatMap((_, source) => {
    const span = spanOf(kept.filter((row) => row.source === source));
    if (span === null) return [];
    const own = inside.filter((row) => row.source === source);
    const first = hourOf(span.first);
    const all = kept.filter((row) => row.source === source && row.us !== null).length;
    return [
      {
        source,
        outside: all - span.rows,
        hours: Array.from({ length: hourOf(span.last) - first + 1 }, (_hour, i) => {
          const ms = (first + i) * HOUR_MS;
          const local = Math.floor((ms + clock.offset(ms)) / HOUR_MS);
          const day = Math.floor(local / 24);
          const here = own.filter(({ hour }) => hour === first + i);
          const byVariant = plan.variants.map((_variant, v) => here.filter(({ variant }) => variant === v).length);
          return { day, hour: local - 24 * day, rows: here.length, byVariant };
        }),
      },
    ];
  });
}

const KEPT = 20;

export function silencesOf(plan: Plan, ended: readonly Ended[], enrolled: readonly Unit[]): Silence[] {
  const inside = rowsInSpans(ended, enrolled);
  const found = plan.log.flatMap((_, source) => {
    const all = inside.filter((row) => row.source === source);
    const own = all.filter(({ variant }) => variant !== null);
    const hours = [...new Set(own.map(({ hour }) => hour))].sort((a, b) => a - b);
    const start = firstHour(ended, source);
    return plan.variants.flatMap((_variant, v) => {
      const has = (hour: number) => own.some((row) => row.hour === hour && row.variant === v);
      if (!hours.some(has)) return [];
      return runsOf(hours, has).map((run) => {
        const rows = own.filter(({ hour }) => run.includes(hour));
        return {
          rows: rows.length,
          source,
          variant: v,
          first: (run[0] ?? 0) - start,
          last: (run.at(-1) ?? 0) - start,
          others: new Set(rows.map(({ unit }) => unit)).size,
        };
      });
    });
  });
  return found
    .sort((a, b) => b.rows - a.rows || a.source - b.source || a.variant - b.variant || a.first - b.first)
    .slice(0, KEPT)
    .map(({ source, variant, first, last, others }) => ({ source, variant, first, last, others }));
}

function firstHour(ended: readonly Ended[], source: number): number {
  const span = spanOf(
    ended.filter(({ line, row }) => line !== "rejected" && row.source === source).map(({ row }) => row),
  );
  return hourOf(span?.first ?? 0n);
}

/** Hours one after the other for which something does not hold. */
function runsOf(hours: readonly number[], holds: (hour: number) => boolean): number[][] {
  const runs: number[][] = [[]];
  for (const hour of hours) {
    if (holds(hour)) runs.push([]);
    else runs.at(-1)?.push(hour);
  }
  return runs.filter((run) => run.length > 0);
}
