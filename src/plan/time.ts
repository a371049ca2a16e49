import { Temporal } from "temporal-polyfill";
import { decimalOf } from "./number.ts";

/**
 * A time as a log or a plan writes it, in microseconds since the epoch (DESIGN 4, rule 1). The reference for what the
 * engine's statements accept.
 *
 * - `YYYY-MM-DD` alone is local midnight; with T or one space comes `HH:MM[:SS[.fraction]]`, and optionally `Z`, `+-HH`,
 *   `+-HHMM` or `+-HH:MM`. Digits past the microsecond are cut. No leap second: 23:59:60 is no time.
 * - A bare integer is an epoch: up to 11 digits seconds, up to 14 milliseconds, else microseconds.
 * - Without an offset the time is the zone's: an hour that occurs twice is the first, one that does not exist moves
 *   forward by the length of the gap.
 *
 * @returns null if the text is no time, or lies beyond the year 275760, where calendars end
 */
export function parseTime(text: string, zone: string): bigint | null {
  const epoch = /^[+-]?(\d+)$/.exec(text);
  if (epoch !== null) return inRange(BigInt(text.replace("+", "")) * epochUnit((epoch[1] ?? "").length));

  const match = TIME.exec(text);
  if (match === null) return null;
  const [, date = "", clock = "00:00", second = "00", fraction = "", offset] = match;
  const local = plainTime(`${date}T${clock}:${second}`);
  if (local === null) return null;

  const micros = BigInt(fraction.slice(0, 6).padEnd(6, "0"));
  if (offset === undefined) return inRange(wholeSeconds(local, zone) * 1_000_000n + micros);
  const offsetSeconds = secondsOf(offset);
  return offsetSeconds === null
    ? null
    : inRange((wholeSeconds(local, "UTC") - BigInt(offsetSeconds)) * 1_000_000n + micros);
}

/** The zone's own spelling ("europe/oslo" is "Europe/Oslo"), or null if there is none of that name. */
export function timeZoneNamed(name: string): string | null {
  if (!/^[A-Za-z]/.test(name)) return null; // a bare offset is no zone: it knows no summer time
  try {
    return Temporal.Instant.fromEpochMilliseconds(0).toZonedDateTimeISO(name).timeZoneId;
  } catch {
    return null;
  }
}

/** Whether so many days of 24 hours are a whole number of microseconds, the grain of all times. */
export function isWholeMicroseconds(days: number): boolean {
  const [whole = "", fraction = ""] = decimalOf(days).split(".");
  return (BigInt(whole + fraction) * DAY) % 10n ** BigInt(fraction.length) === 0n;
}
const DAY = 86_400_000_000n; // microseconds

const TIME =
  /^(\d{4}-\d{2}-\d{2})(?:[T ](\d{2}:\d{2})(?::(\d{2})(?:\.(\d+))?)?(Z|[+-]\d{2}|[+-]\d{4}|[+-]\d{2}:\d{2})?)?$/;
const LAST = 8_640_000_000_000_000_000n; // microseconds; the end of ECMAScript's calendar, on either side of 1970

const inRange = (us: bigint): bigint | null => (us > LAST || us < -LAST ? null : us);

function epochUnit(digits: number): bigint {
  if (digits <= 11) return 1_000_000n;
  return digits <= 14 ? 1_000n : 1n;
}

function plainTime(text: string): Temporal.PlainDateTime | null {
  if (!/^\d{4}-\d\d-\d\dT([01]\d|2[0-3]):[0-5]\d:[0-5]\d$/.test(text)) return null;
  try {
    return Temporal.PlainDateTime.from(text);
  } catch {
    return null; // a day that the calendar lacks
  }
}

/** "compatible" is RFC 5545's rule: of an hour that occurs twice the first, one that does not exist moves forward. */
function wholeSeconds(local: Temporal.PlainDateTime, zone: string): bigint {
  return BigInt(local.toZonedDateTime(zone, { disambiguation: "compatible" }).epochMilliseconds) / 1_000n;
}

function secondsOf(offset: string): number | null {
  if (offset === "Z") return 0;
  const hours = Number(offset.slice(1, 3));
  const minutes = Number(offset.slice(3).replace(":", "") || "0");
  if (hours > 23 || minutes > 59) return null;
  return (offset.startsWith("-") ? -1 : 1) * (hours * 3600 + minutes * 60);
}
