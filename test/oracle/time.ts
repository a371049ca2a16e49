/**
 * Times and local days as DESIGN 4 (rules 1 and 8) reads them, from nothing but the offsets that Intl gives.
 * Instants are microseconds since the epoch; a day is its number since 1970-01-01.
 */
export interface Clock {
  /** Null where the text is not a time. */
  readonly read: (text: string) => bigint | null;
  /** The local day an instant lies in: days run from local midnight to local midnight. */
  readonly day: (us: bigint) => number;
  /** First instant of a local day. */
  readonly dayStart: (day: number) => bigint;
  /** Local time minus UTC, in milliseconds, at an instant in milliseconds. */
  readonly offset: (ms: number) => number;
}

const MINUTE = 60_000;
const HOUR = 60 * MINUTE;
const DAY = 24 * HOUR;

const ISO = /^(\d{4})-(\d\d)-(\d\d)(?:[T ](\d\d):(\d\d)(?::(\d\d)(?:\.(\d+))?)?(Z|[+-]\d\d(?::?\d\d)?)?)?$/;
const INTEGER = /^\d+$/;

export function clockOf(zone: string): Clock {
  const format = new Intl.DateTimeFormat("en-US", {
    timeZone: zone,
    hourCycle: "h23",
    year: "numeric",
    month: "numeric",
    day: "numeric",
    hour: "numeric",
    minute: "numeric",
    second: "numeric",
  });
  const known = new Map<number, number>();

  function offset(ms: number): number {
    const second = Math.floor(ms / 1000) * 1000;
    const before = known.get(second);
    if (before !== undefined) return before;
    const part: Record<string, number> = {};
    for (const { type, value } of format.formatToParts(second)) part[type] = Number(value);
    const { year = 0, month = 0, day = 0, hour = 0, minute = 0, second: secondOfMinute = 0 } = part;
    const found = Date.UTC(year, month - 1, day, hour, minute, secondOfMinute) - second;
    known.set(second, found);
    return found;
  }

  /** A local time that occurs twice is the first; one that does not exist moves forward by the gap. */
  function instantOf(local: number): number {
    const before = offset(local - 15 * HOUR); // no zone is more than 14 hours ahead of UTC
    const after = offset(local + 13 * HOUR); // nor more than 12 behind
    const real = [local - before, local - after].filter((ms) => ms + offset(ms) === local);
    return real.length > 0 ? Math.min(...real) : local - before;
  }

  function read(text: string): bigint | null {
    if (INTEGER.test(text)) return readEpoch(text);
    const parts = ISO.exec(text);
    if (parts === null) return null;
    const [, year, month, day, hour = "0", minute = "0", second = "0", fraction = "", zoneText] = parts;
    const midnight = dateMs(Number(year), Number(month), Number(day));
    if (midnight === null || Number(hour) > 23 || Number(minute) > 59 || Number(second) > 59) return null;
    const local = midnight + Number(hour) * HOUR + Number(minute) * MINUTE + Number(second) * 1000;
    const micros = BigInt(fraction.slice(0, 6).padEnd(6, "0"));
    const given = zoneText === undefined ? undefined : readOffset(zoneText);
    if (given === null) return null;
    return BigInt(given === undefined ? instantOf(local) : local - given) * 1000n + micros;
  }

  const dayStart = (day: number): bigint => BigInt(instantOf(day * DAY)) * 1000n;

  function day(us: bigint): number {
    const ms = Number(us / 1000n) - (us % 1000n < 0n ? 1 : 0);
    const calendar = Math.floor((ms + offset(ms)) / DAY);
    const reached = [calendar + 1, calendar, calendar - 1].find((candidate) => dayStart(candidate) <= us);
    if (reached === undefined) throw new Error(`no local day holds ${us} in ${zone}`);
    return reached;
  }

  return { read, day, dayStart, offset };
}

/** Up to 11 digits seconds, up to 14 milliseconds, else microseconds. */
function readEpoch(text: string): bigint {
  const value = BigInt(text);
  if (text.length <= 11) return value * 1_000_000n;
  return text.length <= 14 ? value * 1000n : value;
}

/** Midnight UTC of a date; null where the calendar has no such date. */
function dateMs(year: number, month: number, day: number): number | null {
  const date = new Date(0);
  date.setUTCFullYear(year, month - 1, day);
  const same = date.getUTCFullYear() === year && date.getUTCMonth() === month - 1 && date.getUTCDate() === day;
  return same ? date.getTime() : null;
}

/** In milliseconds; null where it is not an offset of a clock. */
function readOffset(text: string): number | null {
  if (text === "Z") return 0;
  const hours = Number(text.slice(1, 3));
  const minutes = Number(text.slice(3).replace(":", "") || "0");
  if (hours > 23 || minutes > 59) return null;
  return (text.startsWith("-") ? -1 : 1) * (hours * HOUR + minutes * MINUTE);
}
