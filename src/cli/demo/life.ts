import {
  type Arm,
  CONTACTS,
  EFFECTS,
  EXTRA_BOOKINGS,
  FARES,
  FOLLOW_UP_DAYS,
  type Kind,
  SECONDS,
  VISITS,
} from "./planted.ts";
import type { Random, Weighted } from "./random.ts";

export const HOUR = 3_600_000;
export const DAY = 24 * HOUR;
/** Norway is one hour ahead of UTC in all of the log's four weeks; summer time begins on 29 March 2026. */
export const AHEAD = HOUR;

/** Milliseconds since the epoch of a local midnight in February (month 2) or March 2026. */
export function midnight(month: number, day: number): number {
  return Date.UTC(2026, month - 1, day) - AHEAD;
}
export const LOG_FROM = midnight(2, 23);
/** A few visitors saw the test's trial run, before the plan's enrolment began. */
export const TRIAL_FROM = midnight(2, 26);
export const ENROLMENT_FROM = midnight(3, 2);
export const ENROLMENT_BEFORE = midnight(3, 16);
export const LOG_BEFORE = midnight(3, 23);

export interface Visitor {
  readonly id: string;
  readonly platform: string;
  readonly country: string;
  readonly route: string;
  readonly isStaff: boolean;
}

/** One event, before it is written: numbers as the log's text, empty where the event has none. */
export interface LogRow {
  readonly at: number;
  readonly event: string;
  readonly visitor: Visitor;
  readonly arm: string;
  readonly fare: string;
  readonly seconds: string;
  readonly minutes: string;
}

export interface Enrolled {
  readonly visitor: Visitor;
  readonly kind: Kind;
  /** What the log names; a preview's name is not one of the plan's. */
  readonly arm: string;
  readonly at: number;
  readonly hasPast: boolean;
}

const PAST_EVENTS: readonly Weighted<string>[] = [
  ["page_view", 0.6],
  ["timetable_opened", 0.25],
  ["search_opened", 0.15],
];

/** All that one enrolled visitor does in the four weeks, in no order. */
export function life(random: Random, enrolled: Enrolled): LogRow[] {
  const level = FARES.visitorSd * random.normal();
  const rows = [
    ...(enrolled.hasPast ? past(random, enrolled, level) : []),
    ...visits(random, enrolled),
    ...bookings(random, enrolled, level),
    ...contacts(random, enrolled),
  ];
  return rows.filter((row) => row.at >= LOG_FROM && row.at < LOG_BEFORE);
}

export function row(visitor: Visitor, at: number, event: string, more: Details = NONE): LogRow {
  const { arm = "", fare = "", seconds = "", minutes = "" } = more;
  return { at, event, visitor, arm, fare, seconds, minutes };
}
type Details = Partial<Pick<LogRow, "arm" | "fare" | "seconds" | "minutes">>;
const NONE: Details = {};

/** What a visitor did before its enrolment: it names no variant and counts only as past. */
function past(random: Random, { visitor, kind, at }: Enrolled, level: number): LogRow[] {
  const from = Math.max(LOG_FROM, at - 14 * DAY);
  const before = () => Math.floor(from + (at - from) * random.uniform());
  const seen = Array.from({ length: 2 + random.poisson(1.8) }, () => {
    const then = before();
    const event = random.pick(PAST_EVENTS);
    // From the trial run on, opening the search page enrols: what a visitor did before that must be something else.
    return row(visitor, then, event === "search_opened" && then >= TRIAL_FROM ? "page_view" : event);
  });
  const booked = Array.from({ length: random.poisson(kind.pastBookings) }, () =>
    row(visitor, before(), "booking", { fare: fare(random, level, "") }),
  );
  return [...seen, ...booked];
}

/** The enrolling visit and those after it. */
function visits(random: Random, { visitor, arm, at }: Enrolled): LogRow[] {
  const connection = SECONDS.visitorSd * random.normal();
  const search = (then: number) =>
    row(visitor, then, "search_opened", { arm, seconds: seconds(random, connection, arm) });
  const view = (then: number) => row(visitor, then, "page_view", { arm });
  const soon = (start: number) => Math.floor(start + 1000 + random.uniform() * 10 * 60_000);

  const rows = [search(at)];
  for (let n = random.poisson(VISITS.searchesFirst); n > 0; n--) rows.push(search(soon(at)));
  for (let n = 1 + random.poisson(0.9); n > 0; n--) rows.push(view(soon(at)));
  for (let visit = random.poisson(VISITS.extra); visit > 0; visit--) {
    const start = Math.floor(at - Math.log(1 - random.uniform()) * VISITS.meanDelayDays * DAY);
    for (let n = random.poisson(VISITS.searchesLater); n > 0; n--) rows.push(search(soon(start)));
    for (let n = 1 + random.poisson(0.8); n > 0; n--) rows.push(view(soon(start)));
  }
  return rows;
}

/** Bookings within the follow-up with the planted share; free children's tickets and cancellations come with them. */
function bookings(random: Random, { visitor, kind, arm, at }: Enrolled, level: number): LogRow[] {
  const followUp = FOLLOW_UP_DAYS * DAY;
  const rows: LogRow[] = [];
  const book = (then: number) => {
    rows.push(row(visitor, then, "booking", { arm, fare: fare(random, level, arm) }));
    if (random.chance(0.08)) rows.push(row(visitor, then + 400, "booking", { arm, fare: "0" }));
    if (random.chance(0.05)) {
      rows.push(row(visitor, Math.floor(then + random.uniform() * 3 * DAY), "booking_cancelled", { arm }));
    }
  };

  const share = kind.booksWithList * effect(arm, EFFECTS.booked);
  if (random.chance(share)) {
    // Exponential with a mean of a day, cut to the follow-up by its inverse distribution function.
    const mass = 1 - Math.exp(-FOLLOW_UP_DAYS);
    const first = Math.floor(at + 1 - Math.log(1 - mass * random.uniform()) * DAY);
    const end = at + followUp - 1000;
    book(Math.min(first, end));
    for (let n = random.poisson(EXTRA_BOOKINGS); n > 0; n--) {
      book(Math.floor(Math.min(first, end) + random.uniform() * (end - Math.min(first, end))));
    }
  }
  if (random.chance(0.15 * share)) book(Math.floor(at + followUp + random.uniform() * 5 * DAY));
  return rows;
}

/** Support contacts within the follow-up, at the hours of the desk: 7 to 22 local time. */
function contacts(random: Random, { visitor, arm, at }: Enrolled): LogRow[] {
  if (!random.chance(CONTACTS.share * effect(arm, EFFECTS.contacts))) return [];
  return Array.from({ length: 1 + random.poisson(CONTACTS.extra) }, () => {
    let then = at;
    do then = Math.floor(at + random.uniform() * FOLLOW_UP_DAYS * DAY);
    while (!deskIsOpen(then));
    return row(visitor, then, "support_contact", { minutes: (Math.exp(1.6 + 0.8 * random.normal()) + 0.5).toFixed(1) });
  });
}

function deskIsOpen(at: number): boolean {
  const hour = ((at + AHEAD) % DAY) / HOUR;
  return hour >= 7 && hour < 22;
}

function effect(arm: string, calendar: number): number {
  return arm === ("calendar" satisfies Arm) ? calendar : 1;
}

/** Whole kroner, never 0. */
function fare(random: Random, level: number, arm: string): string {
  const { party } = FARES;
  const value = random.chance(party.share)
    ? party.median * Math.exp(party.sd * random.normal())
    : FARES.median * Math.exp(level + FARES.bookingSd * random.normal());
  return String(Math.max(1, Math.round(value * effect(arm, EFFECTS.fare))));
}

function seconds(random: Random, connection: number, arm: string): string {
  const spread = (SECONDS.visitorSd ** 2 + SECONDS.openingSd ** 2) / 2;
  const value = SECONDS.mean * Math.exp(connection + SECONDS.openingSd * random.normal() - spread);
  return (value * effect(arm, EFFECTS.seconds)).toFixed(2);
}
