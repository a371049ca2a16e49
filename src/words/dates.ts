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
