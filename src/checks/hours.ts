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
 * The runs of hours without a row over which the same hours, by the clock, have at least 20 rows a week before and after; or,
 * where the log holds neither week, as many days before and after as the run is long. Of two such runs both must have them:
 * an hour that is quiet every week is no gap.
 */
export function gapsOf(hours: readonly HourOfLog[]): HourRun[] {
  const others = sameHours(hours);
  return emptyRuns(hours).filter((run) => {
    const rows = others(run).map((same) => same.reduce((total, hour) => total + hour.rows, 0));
    return rows.length > 0 && rows.every((total) => total >= ROWS_AT_LEAST);
  });
}

/**
 * Rows by variant of hours that should be like those of a run: the same by the clock in other weeks or days, and a day before
 * and after it. Without any of the first kind, one list of no rows.
 */
export function hoursLike(hours: readonly HourOfLog[], run: HourRun): ByVariant[] {
  const same = sameHours(hours)(run).map((own) => added(own.map(({ byVariant }) => byVariant)));
  const around = [
    ...hours.slice(Math.max(0, run.first - DAY), run.first),
    ...hours.slice(run.last + 1, run.last + 1 + DAY),
  ];
  return same.length === 0 ? [[]] : [...same, added(around.map(({ byVariant }) => byVariant))];
}

const DAY = 24;

/** The hours that show the same on the clock as those of a run, a week before and one after it, or days before and after. */
function sameHours(hours: readonly HourOfLog[]): (run: HourRun) => HourOfLog[][] {
  const byPlace = new Map<number, HourOfLog[]>();
  // the hour that the clock shows twice in autumn is both
  for (const hour of hours) byPlace.set(placeOf(hour), [...(byPlace.get(placeOf(hour)) ?? []), hour]);
  const [start = 0, end = 0] = [hours[0], hours.at(-1)].map((hour) => (hour === undefined ? 0 : placeOf(hour)));
  return (run) => {
    const places = hours.slice(run.first, run.last + 1).map(placeOf);
    const days = Math.ceil(places.length / DAY);
    const weeks = Math.ceil(days / WEEK) * WEEK;
    const away = (shift: number) =>
      [-shift, shift]
        .map((by) => places.map((place) => place + by * DAY))
        .filter((moved) => (moved[0] ?? 0) >= start && (moved.at(-1) ?? 0) <= end)
        .map((moved) => moved.flatMap((place) => byPlace.get(place) ?? []));
    const ofWeeks = away(weeks);
    return ofWeeks.length > 0 ? ofWeeks : away(days);
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
