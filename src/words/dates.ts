import { list, plural } from "./nouns.ts";

/** A day of the calendar; month 1 to 12. */
export interface Day {
  readonly year: number;
  readonly month: number;
  readonly day: number;
}

const MONTHS = [
  "January",
  "February",
  "March",
  "April",
  "May",
  "June",
  "July",
  "August",
  "September",
  "October",
  "November",
  "December",
] as const;

/** "15 March 2026". */
export function dateText(day: Day): string {
  return `${dayAndMonth(day)} ${day.year}`;
}

/** "2 to 15 March 2026", "28 February to 3 March 2026", "28 December 2025 to 3 January 2026"; one day stands alone. */
export function dateSpan(first: Day, last: Day): string {
  if (first.year !== last.year) return `${dateText(first)} to ${dateText(last)}`;
  if (first.month !== last.month) return `${dayAndMonth(first)} to ${dateText(last)}`;
  return first.day === last.day ? dateText(last) : `${first.day} to ${dateText(last)}`;
}

function dayAndMonth({ month, day }: Day): string {
  const name = MONTHS[month - 1];
  if (name === undefined) throw new Error(`a month is 1 to 12, not ${month}`);
  return `${day} ${name}`;
}

/** The calendar's day, of days since 1970-01-01. */
export function dayOfEpoch(days: number): Day {
  const date = new Date(days * 86_400_000);
  return { year: date.getUTCFullYear(), month: date.getUTCMonth() + 1, day: date.getUTCDate() };
}

const SPANS_NAMED = 4;

/** Days since 1970-01-01, in order, as a text: "2 to 4 March 2026 and 9 March 2026"; of many the first. */
export function daysText(days: readonly number[]): string {
  const spans: { first: number; last: number }[] = [];
  for (const day of days) {
    const span = spans.at(-1);
    if (span !== undefined && day === span.last + 1) span.last = day;
    else spans.push({ first: day, last: day });
  }
  const texts = spans.slice(0, SPANS_NAMED).map(({ first, last }) => dateSpan(dayOfEpoch(first), dayOfEpoch(last)));
  const more = spans.slice(SPANS_NAMED).reduce((sum, { first, last }) => sum + last - first + 1, 0);
  return list([...texts, ...(more === 0 ? [] : [plural(more, "more day", "more days")])]);
}
