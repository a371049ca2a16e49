import {
  DAY,
  ENROLMENT_BEFORE,
  ENROLMENT_FROM,
  type Enrolled,
  HOUR,
  LOG_BEFORE,
  LOG_FROM,
  type LogRow,
  life,
  midnight,
  row,
  TRIAL_FROM,
  type Visitor,
} from "./life.ts";
import { KINDS } from "./planted.ts";
import type { Random, Weighted } from "./random.ts";

/** How many of each appear in the log. Only `enrolled` are the test's own; the rest is what a plan must sort out. */
export const CAST = {
  enrolled: 40_600,
  /** Of these, seen with both variants. */
  switched: 26,
  staff: 320,
  loadTest: 60,
  trialRun: 80,
  afterEnrolment: 600,
  previews: 22,
  neverSearched: 2_400,
  probes: 1,
} as const;

const COUNTRIES: readonly Weighted<string>[] = [
  ...([
    ["NO", 52],
    ["SE", 14],
    ["DE", 12],
    ["DK", 9],
    ["NL", 3],
    ["GB", 2.5],
    ["FI", 2],
    ["PL", 1.2],
  ] as const),
  ...([
    ["FR", 1],
    ["CH", 0.8],
    ["US", 0.8],
    ["ES", 0.4],
    ["IT", 0.4],
    ["IS", 0.4],
    ["", 0.5],
  ] as const),
];
const PLATFORMS: readonly Weighted<string>[] = [
  ["browser", 46],
  ["phone", 46],
  ["tablet", 8],
];
/** Invented crossings; the comma makes a cell that must be quoted, the letters need UTF-8. */
const ROUTES: readonly Weighted<string>[] = [
  ["Tangvær–Halvsund", 38],
  ["Halvsund–Brimøy", 27],
  ["Tangvær–Brimøy", 18],
  ["Osterskjær, north quay", 11],
  ["Osterskjær, south quay", 6],
];
const ARMS: readonly Weighted<string>[] = [
  ["list", 1],
  ["calendar", 1],
];

/** Monday to Sunday: a ferry line's site is busiest before the weekend. */
const WEEKDAYS: readonly Weighted<number>[] = [
  [0, 10],
  [1, 10],
  [2, 11],
  [3, 13],
  [4, 15],
  [5, 12],
  [6, 12],
];
const HOURS: readonly Weighted<number>[] = [
  ...Array.from({ length: 6 }, (_, hour) => [hour, 1] as const),
  ...Array.from({ length: 12 }, (_, hour) => [hour + 6, 6] as const),
  ...Array.from({ length: 6 }, (_, hour) => [hour + 18, 8] as const),
];

/** Everything that everyone in the cast did, in no order. */
export function allRows(random: Random): LogRow[] {
  const visitors = cast(random);
  const enrolled = (at: () => number, more: Partial<Enrolled> = {}, staff = false) =>
    life(random, {
      visitor: visitors(staff),
      kind: random.pick(KINDS),
      arm: random.pick(ARMS),
      at: at(),
      hasPast: random.chance(2 / 3),
      ...more,
    });
  const days = (from: number, count: number) => () => Math.floor(from + random.uniform() * count * DAY);
  const inTest = () =>
    ENROLMENT_FROM + 7 * DAY * Number(random.chance(0.5)) + DAY * random.pick(WEEKDAYS) + timeOfDay(random);

  return [
    ...many(CAST.enrolled - CAST.switched, () => enrolled(inTest)),
    ...many(CAST.switched, () => switched(random, enrolled(inTest))),
    // Staff book for training, and more so with the calendar, which was new to them.
    ...many(CAST.staff, () => enrolled(inTest, { kind: { booksWithList: 0.6, pastBookings: 3 } }, true)),
    ...many(CAST.trialRun, () => enrolled(days(TRIAL_FROM, 4))),
    ...many(CAST.afterEnrolment, () => enrolled(days(ENROLMENT_BEFORE, 2.4))),
    ...many(CAST.previews, () => enrolled(days(ENROLMENT_FROM, 14), { arm: "map", hasPast: false })),
    ...many(CAST.neverSearched, () => passerBy(random, visitors(false))),
    ...many(CAST.loadTest, (index) => loadTest(random, { ...visitors(false), id: loadTestId(index) })),
    ...many(CAST.probes, () => probe({ ...visitors(false), id: "probe-quay" })),
  ].flat();
}

export function loadTestId(index: number): string {
  return `lt-${String(index + 1).padStart(3, "0")}`;
}

/** Hands out visitors; ids are a one-to-one scramble of their number (an odd factor modulo 2^32), so that they do not sort by time. */
function cast(random: Random): (isStaff: boolean) => Visitor {
  let made = 0;
  return (isStaff) => {
    made += 1;
    return {
      id: (Math.imul(made, 0x9e3779b1) >>> 0).toString(36).padStart(7, "0"),
      platform: random.pick(PLATFORMS),
      country: random.pick(COUNTRIES),
      route: random.pick(ROUTES),
      isStaff,
    };
  };
}

function timeOfDay(random: Random): number {
  return Math.floor((random.pick(HOURS) + random.uniform()) * HOUR);
}

/** The same visitor on a second device, which was given the other variant. */
function switched(random: Random, rows: LogRow[]): LogRow[] {
  const first = rows.find((one) => one.event === "search_opened" && one.arm !== "");
  if (first === undefined) throw new Error("an enrolled visitor has no enrolling row");
  const at = Math.floor(first.at + HOUR * (1 + 60 * random.uniform()));
  return [...rows, { ...first, at, arm: first.arm === "list" ? "calendar" : "list" }];
}

function passerBy(random: Random, visitor: Visitor): LogRow[] {
  const at = LOG_FROM + DAY * Math.floor(28 * random.uniform()) + timeOfDay(random);
  return many(1 + random.poisson(1.4), (index) =>
    row(visitor, Math.min(at + index * 40_000, LOG_BEFORE - 1), random.chance(0.5) ? "timetable_opened" : "page_view"),
  );
}

/** The machine that loaded the search page in the night to 4 March, to see whether the calendar holds. */
function loadTest(random: Random, visitor: Visitor): LogRow[] {
  const arm = random.pick(ARMS);
  const at = midnight(3, 4) + 2 * HOUR;
  const searches = many(50, (index) =>
    row(visitor, at + index * 40_000 + Math.floor(random.uniform() * 30_000), "search_opened", {
      arm,
      seconds: "0.31",
    }),
  );
  const bookings = many(10, (index) => row(visitor, at + 35_000 + index * 200_000, "booking", { arm, fare: "100" }));
  return [...searches, ...bookings];
}

/** Looks every ten minutes whether the site answers. */
function probe(visitor: Visitor): LogRow[] {
  return many(28 * 24 * 6, (index) => row(visitor, LOG_FROM + index * 600_000, "page_view"));
}

function many<T>(count: number, make: (index: number) => T): T[] {
  return Array.from({ length: count }, (_, index) => make(index));
}
