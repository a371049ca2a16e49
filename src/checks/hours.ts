import type { HourOfLog } from "../engine/soundnessTypes.ts";
import type { ByVariant } from "../engine/types.ts";
import { dateText, dayOfEpoch } from "../words/index.ts";
import { added } from "./flow.ts";

/** Places in a list of hours, both inclusive. */
export interface HourRun {
  readonly first: number;
  readonly last: number;
}

/**
 * Rows that the same hours of other days must hold before none is a gap; ours. Of rows that come by chance, as many are
 * missing altogether once in 5 x 10^8 (Poisson, e^-20); rows of one unit come together, so the limit is wide.
 */
const ROWS_AT_LEAST = 20;
const WEEK = 7;

/**
 * The runs of hours without a row that lie between hours which should be like them and have at least 20 rows: on either side the
 * same hours by the clock, whole weeks away and as few whole days as the run is long; or, where the log holds none of them
 * on that side, as many hours next to the run. All must have the rows: an hour that is quiet every week is no gap, and a
 * log that begins thinly has none.
 */
export function gapsOf(hours: readonly HourOfLog[]): HourRun[] {
  const same = sameHours(hours);
  return emptyRuns(hours).filter((run) => {
    const length = run.last - run.first + 1;
    const sides = [
      { side: -1, next: hours.slice(Math.max(0, run.first - length), run.first) },
      { side: 1, next: hours.slice(run.last + 1, run.last + 1 + length) },
    ] as const;
    return sides.every(({ side, next }) => {
      const alike = same(run, side);
      return (alike.length > 0 ? alike : [next]).every((others) => rowsOf(others) >= ROWS_AT_LEAST);
    });
  });
}

const rowsOf = (hours: readonly HourOfLog[]): number => hours.reduce((total, { rows }) => total + rows, 0);

/**
 * Rows by variant of hours that should be like those of a run: the same by the clock in other weeks and on other days, and a
 * day before and after it. Without any of the first kind, one list of no rows.
 */
export function hoursLike(hours: readonly HourOfLog[], run: HourRun): ByVariant[] {
  const same = sameHours(hours);
  const alike = [...same(run, -1), ...same(run, 1)].map((own) => added(own.map(({ byVariant }) => byVariant)));
  const around = [
    ...hours.slice(Math.max(0, run.first - DAY), run.first),
    ...hours.slice(run.last + 1, run.last + 1 + DAY),
  ];
  return alike.length === 0 ? [[]] : [...alike, added(around.map(({ byVariant }) => byVariant))];
}

const DAY = 24;

/** The hours before (-1) or after (1) a run that the clock shows like those of it: weeks away, and days away. */
function sameHours(hours: readonly HourOfLog[]): (run: HourRun, side: -1 | 1) => HourOfLog[][] {
  const byPlace = new Map<number, HourOfLog[]>();
  // the hour that the clock shows twice in autumn is both
  for (const hour of hours) byPlace.set(placeOf(hour), [...(byPlace.get(placeOf(hour)) ?? []), hour]);
  const [start = 0, end = 0] = [hours[0], hours.at(-1)].map((hour) => (hour === undefined ? 0 : placeOf(hour)));
  return (run, side) => {
    const places = hours.slice(run.first, run.last + 1).map(placeOf);
    const days = Math.ceil(places.length / DAY);
    const away = [...new Set([days, Math.ceil(days / WEEK) * WEEK])];
    return away
      .map((by) => places.map((place) => place + side * by * DAY))
      .filter((moved) => (moved[0] ?? 0) >= start && (moved.at(-1) ?? 0) <= end)
      .map((moved) => moved.flatMap((place) => byPlace.get(place) ?? []));
  };
}

/** Hours of the clock since 1970-01-01. */
const placeOf = ({ day, hour }: HourOfLog): number => day * DAY + hour;

function emptyRuns(hours: readonly HourOfLog[]): HourRun[] {
  const runs: { first: number; last: number }[] = [];
  for (const [i, { rows }] of hours.entries()) {
    if (rows > 0) continue;
    const run = runs.at(-1);
    if (run !== undefined && run.last === i - 1) run.last = i;
    else runs.push({ first: i, last: i });
  }
  return runs;
}

/** "on 9 March 2026 from 14:00 to 17:00", "from 9 March 2026, 22:00 to 10 March 2026, 3:00". */
export function runText(hours: readonly HourOfLog[], { first, last }: HourRun): string {
  const [start, end] = [hours[first], hours[last]];
  if (start === undefined || end === undefined) throw new Error(`no hours ${first} to ${last} of ${hours.length}`);
  const date = (day: number) => dateText(dayOfEpoch(day));
  return start.day === end.day
    ? `on ${date(start.day)} from ${start.hour}:00 to ${end.hour + 1}:00`
    : `from ${date(start.day)}, ${start.hour}:00 to ${date(end.day)}, ${end.hour + 1}:00`;
}
