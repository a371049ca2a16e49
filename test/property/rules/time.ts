import { DAY_US, partMatches, runsOf, spanOf } from "../../oracle/span.ts";
import { followUpEnd } from "../../oracle/units.ts";
import { count, endedRows, parts, type Rules, type Seen } from "./seen.ts";

const WEEK_US = 7n * DAY_US;

/** The text of each time of the log. */
function timeTexts({ plan, trace }: Seen): string[] {
  return trace.rows.flatMap((row) => {
    const column = plan.log[row.source]?.columns.time ?? null;
    const text = column === null ? null : row.cell(column);
    return text === null ? [] : [text];
  });
}

const matching =
  (form: RegExp) =>
  (seen: Seen): number =>
    count(timeTexts(seen), (text) => form.test(text) && seen.trace.clock.read(text) !== null);

const forms: Rules = {
  "time: a date alone": matching(/^\d{4}-\d\d-\d\d$/),
  "time: without seconds": matching(/[T ]\d\d:\d\d($|Z|[+-])/),
  "time: with a space": matching(/^\d{4}-\d\d-\d\d /),
  "time: Z": matching(/Z$/),
  "time: offset of hours": matching(/:\d\d(\.\d+)?[+-]\d\d$/),
  "time: offset of four digits": matching(/[+-]\d{4}$/),
  "time: offset with a colon": matching(/[+-]\d\d:\d\d$/),
  "time: digits past the microsecond": matching(/\.\d{7,}/),
  "time: seconds since the epoch": matching(/^\d{1,11}$/),
  "time: milliseconds since the epoch": matching(/^\d{12,14}$/),
  "time: microseconds since the epoch": matching(/^\d{15,}$/),
  "time: a local time that occurs twice": (seen) => count(timeTexts(seen), (text) => occurrences(seen, text) === 2),
  "time: a local time that does not exist": (seen) => count(timeTexts(seen), (text) => occurrences(seen, text) === 0),
};

/** How many instants show a local time on the clock; 1 for a text that is none. */
function occurrences({ trace }: Seen, text: string): number {
  if (!/^\d{4}-\d\d-\d\d([T ][\d:.]+)?$/.test(text) || trace.clock.read(text) === null) return 1;
  const local = Date.parse(`${text.replace(" ", "T")}${text.length === 10 ? "T00:00" : ""}Z`);
  const offsets = new Set(Array.from({ length: 57 }, (_, hour) => trace.clock.offset(local + (hour - 28) * 3_600_000)));
  return count([...offsets], (offset) => trace.clock.offset(local - offset) === offset);
}

const followUp: Rules = {
  "follow-up: a row exactly at its end": (seen) => count(followed(seen), ({ us, end }) => us === end),
  "follow-up: a row a microsecond before its end": (seen) => count(followed(seen), ({ us, end }) => us === end - 1n),
  "follow-up: over a change of the clocks": ({ plan, trace }) =>
    plan.followUp !== null &&
    count(trace.units, ({ line, enrolledUs }) => {
      if (line !== "analysed" || enrolledUs === null) return false;
      return (
        trace.clock.offset(Number(enrolledUs / 1000n)) !==
        trace.clock.offset(Number(followUpEnd(plan, enrolledUs) / 1000n))
      );
    }),
  "follow-up: ends exactly with the log": ({ plan, trace }) =>
    plan.followUp?.incomplete === "exclude" &&
    count(
      trace.units,
      ({ line, enrolledUs }) =>
        line === "analysed" && enrolledUs !== null && followUpEnd(plan, enrolledUs) === trace.result.facts.logEndUs,
    ),
  "follow-up: ends a microsecond after the log": ({ plan, trace }) =>
    count(
      trace.units,
      ({ line, enrolledUs }) =>
        line === "follow-up" &&
        enrolledUs !== null &&
        followUpEnd(plan, enrolledUs) - 1n === trace.result.facts.logEndUs,
    ),
  "follow-up: incomplete, and kept": ({ plan, trace }) =>
    plan.followUp?.incomplete === "keep" &&
    count(
      trace.units,
      ({ line, enrolledUs }) =>
        line === "analysed" &&
        enrolledUs !== null &&
        followUpEnd(plan, enrolledUs) > (trace.result.facts.logEndUs ?? 0n),
    ),
  "follow-up: none": ({ plan }) => plan.followUp === null,
  "a row at the very time of enrolment that comes before it in order": (seen) => {
    const { units } = seen.trace;
    const ranks = new Map(endedRows(seen).map(({ row, rank }) => [row, rank]));
    const enrolling = new Map(units.map((unit) => [unit.unit, unit]));
    return count(endedRows(seen), ({ row, rank, line }) => {
      const unit = row.unit === null ? undefined : enrolling.get(row.unit);
      const first = unit?.enrolling ?? null;
      return (
        line === "in-follow-up" &&
        first !== null &&
        row.us !== null &&
        row.us === first.us &&
        rank < (ranks.get(first) ?? 0)
      );
    });
  },
};

function followed(seen: Seen): { us: bigint; end: bigint }[] {
  const { plan, trace } = seen;
  if (plan.followUp === null) return [];
  const ends = new Map(
    trace.units.flatMap(({ unit, line, enrolledUs }) =>
      line === "analysed" && enrolledUs !== null ? [[unit, followUpEnd(plan, enrolledUs)]] : [],
    ),
  );
  return trace.rows.flatMap(({ unit, us, rejected }) => {
    const end = unit === null || rejected !== null ? undefined : ends.get(unit);
    return us === null || end === undefined ? [] : [{ us, end }];
  });
}

const bySource = (seen: Seen) =>
  seen.plan.log.map((_, source) => seen.trace.rows.filter((row) => row.rejected === null && row.source === source));
const measured = (seen: Seen) =>
  bySource(seen).filter((rows) => rows.some((row) => parts(seen).some((part) => partMatches(part, row))));

const span: Rules = {
  "span: a gap of more than 7 days": (seen) => count(bySource(seen), (rows) => runsOf(rows).length > 1),
  "span: a gap of exactly 7 days": (seen) => count(bySource(seen), (rows) => gaps(rows).includes(WEEK_US)),
  "span: a gap of 7 days and a microsecond": (seen) =>
    count(bySource(seen), (rows) => gaps(rows).includes(WEEK_US + 1n)),
  "span: two runs with equally many rows": (seen) =>
    count(bySource(seen), (rows) => {
      const most = spanOf(rows)?.rows;
      return runsOf(rows).filter((run) => run.rows === most).length > 1;
    }),
  "span: rows after it": (seen) =>
    count(bySource(seen), (rows) => rows.some(({ us }) => us !== null && us > (spanOf(rows)?.last ?? us))),
  "span: a source that no metric looks at, which ends earlier": (seen) => {
    const end = seen.trace.result.facts.logEndUs;
    return (
      end !== null &&
      measured(seen).length > 0 &&
      measured(seen).length < seen.plan.log.length &&
      bySource(seen).some((rows) => (spanOf(rows)?.last ?? end) < end)
    );
  },
  "span: no source that a metric looks at": (seen) =>
    seen.trace.result.facts.logEndUs !== null && measured(seen).length === 0,
  "span: two sources that end apart": (seen) => new Set(measured(seen).map((rows) => spanOf(rows)?.last)).size > 1,
  "span: a source measured only by rows that a filter takes": (seen) =>
    seen.trace.result.facts.logEndUs !== null &&
    count(measured(seen), (rows) =>
      endedRows(seen).every(
        ({ row, line }) =>
          !rows.includes(row) ||
          line.startsWith("filter:") ||
          line === "duplicate" ||
          !parts(seen).some((part) => partMatches(part, row)),
      ),
    ),
};

function gaps(rows: Parameters<typeof runsOf>[0]): bigint[] {
  const times = rows.flatMap(({ us }) => (us === null ? [] : [us])).sort((a, b) => (a < b ? -1 : 1));
  return times.slice(1).map((time, at) => time - (times[at] ?? time));
}

const DAY_MS = 86_400_000;

/** Instants of rows that a metric of days counts. */
function countedDays(seen: Seen): bigint[] {
  const daily = parts(seen).filter(({ aggregate }) => aggregate.kind === "days");
  return endedRows(seen).flatMap(({ row, line }) =>
    line === "in-follow-up" && row.us !== null && daily.some((part) => partMatches(part, row)) ? [row.us] : [],
  );
}

const days: Rules = {
  "days: a local day that is another in UTC": (seen) =>
    count(countedDays(seen), (us) => seen.trace.clock.day(us) !== Math.floor(Number(us / 1000n) / DAY_MS)),
  "days: a day of 23 hours": (seen) => count(countedDays(seen), (us) => hours(seen, us) === 23),
  "days: a day of 25 hours": (seen) => count(countedDays(seen), (us) => hours(seen, us) === 25),
  "days: after its midnight the clock goes back to the day before": (seen) =>
    count(countedDays(seen), (us) => {
      const ms = Number(us / 1000n);
      return seen.trace.clock.day(us) !== Math.floor((ms + seen.trace.clock.offset(ms)) / DAY_MS);
    }),
  "days: a day that the calendar skips lies between": (seen) =>
    count(countedDays(seen), (us) => hours(seen, us, 1) === 0),
  "days: two rows on one day": (seen) =>
    count(countedDays(seen), (us) =>
      countedDays(seen).some((other) => other !== us && seen.trace.clock.day(other) === seen.trace.clock.day(us)),
    ),
};

/** Length of the local day of an instant, or of a day near it. */
function hours({ trace: { clock } }: Seen, us: bigint, later = 0): number {
  const day = clock.day(us) + later;
  return Number(clock.dayStart(day + 1) - clock.dayStart(day)) / 3_600_000_000;
}

export const timeRules: Rules = { ...forms, ...followUp, ...span, ...days };
