import { Temporal } from "temporal-polyfill";

/**
 * The plan's time zone as short tables, so that no engine needs time-zone data: from where on which offset holds for a
 * local time, and where local days start.
 */

/** From `from` on (microseconds, inclusive) the value holds; the first stands for everything earlier. */
export interface Step<T> {
  readonly from: bigint;
  readonly value: T;
}

const FIRST = Temporal.Instant.from("1800-01-01T00:00Z");
// Rules beyond this year repeat the last offset; no event log lies there.
const LAST = Temporal.Instant.from("2150-01-01T00:00Z");
const DAY_US = 86_400_000_000n;

/**
 * Local time (microseconds since 1970-01-01T00:00 on the local clock) to the offset to subtract, in microseconds.
 * An hour that occurs twice is the first; one that does not exist moves forward by the length of the gap: both read the
 * local time with the offset before the change, until the clock has passed the change in either offset.
 */
export function offsetsByLocalTime(timezone: string): Step<bigint>[] {
  const steps: Step<bigint>[] = [{ from: 0n, value: offsetUs(FIRST.toZonedDateTimeISO(timezone)) }];
  for (const change of changes(timezone)) {
    const before = steps.at(-1)?.value ?? 0n;
    const after = offsetUs(change);
    const at = epochUs(change);
    steps.push({ from: at + (after > before ? after : before), value: after });
  }
  return steps;
}

/** A run of local days of 24 hours, or one day of another length: day = first + min((us - from) / 24 h, days - 1). */
export interface DayRun {
  readonly first: number;
  readonly days: number;
}

/**
 * Instants (microseconds) to local days (days since 1970-01-01), from local midnight to local midnight, for instants
 * in [firstUs, lastUs].
 */
export function dayRuns(timezone: string, firstUs: bigint, lastUs: bigint): Step<DayRun>[] {
  const starts = new Set<bigint>();
  const note = (day: Temporal.ZonedDateTime) => starts.add(epochUs(day.startOfDay()));
  note(instant(firstUs).toZonedDateTimeISO(timezone));
  for (const change of changes(timezone)) {
    const at = epochUs(change);
    if (at < firstUs - 3n * DAY_US || at > lastUs + 3n * DAY_US) continue;
    for (const days of [-1, 0, 1, 2]) note(change.add({ days }));
  }
  const sorted = [...starts].sort((a, b) => (a < b ? -1 : a > b ? 1 : 0));
  return sorted.map((from, i) => {
    const next = sorted[i + 1];
    const first = localDay(from, timezone);
    // The last run has no end: days of 24 hours until the zone's next change.
    const days = next === undefined ? Number.MAX_SAFE_INTEGER : localDay(next, timezone) - first;
    return { from, value: { first, days } };
  });
}

/** The local day of an instant, as a statement finds it in the table. */
export function dayAt(us: bigint, runs: readonly Step<DayRun>[]): number {
  const { from, value } = runs.findLast((run) => run.from <= us) ??
    runs[0] ?? { from: us, value: { first: 0, days: 1 } };
  return value.first + Math.min(Number((us - from) / DAY_US), value.days - 1);
}

/** Days since 1970-01-01 of the local date at an instant. */
export function localDay(us: bigint, timezone: string): number {
  const date = instant(us).toZonedDateTimeISO(timezone).toPlainDate();
  return Temporal.PlainDate.from("1970-01-01").until(date, { largestUnit: "days" }).days;
}

/** What the zone's clock shows at the start of an hour of the epoch: the local day, and the hour 0 to 23. */
export function clockHours(timezone: string): (hour: number) => { readonly day: number; readonly hour: number } {
  const steps = [
    { fromMs: Number.NEGATIVE_INFINITY, offsetMs: FIRST.toZonedDateTimeISO(timezone).offsetNanoseconds / 1e6 },
    ...changes(timezone).map((change) => ({
      fromMs: change.epochMilliseconds,
      offsetMs: change.offsetNanoseconds / 1e6,
    })),
  ];
  return (hour) => {
    const ms = hour * 3_600_000;
    const offset = steps.findLast(({ fromMs }) => fromMs <= ms)?.offsetMs ?? 0;
    const local = Math.floor((ms + offset) / 3_600_000);
    const day = Math.floor(local / 24);
    return { day, hour: local - day * 24 };
  };
}

function changes(timezone: string): Temporal.ZonedDateTime[] {
  const found: Temporal.ZonedDateTime[] = [];
  let next = FIRST.toZonedDateTimeISO(timezone).getTimeZoneTransition("next");
  while (next !== null && Temporal.Instant.compare(next.toInstant(), LAST) < 0) {
    found.push(next);
    next = next.getTimeZoneTransition("next");
  }
  return found;
}

const instant = (us: bigint) => Temporal.Instant.fromEpochNanoseconds(us * 1000n);
const epochUs = (at: Temporal.ZonedDateTime) => at.epochNanoseconds / 1000n;
const offsetUs = (at: Temporal.ZonedDateTime) => BigInt(at.offsetNanoseconds) / 1000n;
