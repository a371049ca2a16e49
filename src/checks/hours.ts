import type { HourOfLog } from "../engine/soundnessTypes.ts";
import { dateText, dayOfEpoch } from "../words/index.ts";

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
  const rows = new Map<number, number>();
  // the hour that the clock shows twice in autumn holds the rows of both
  for (const hour of hours) rows.set(placeOf(hour), (rows.get(placeOf(hour)) ?? 0) + hour.rows);
  const ends = [hours[0], hours.at(-1)].map((hour) => (hour === undefined ? 0 : placeOf(hour)));
  return emptyRuns(hours).filter((run) => {
    const places = hours.slice(run.first, run.last + 1).map(placeOf);
    const days = Math.ceil(places.length / 24);
    const weeks = Math.ceil(days / WEEK) * WEEK;
    const around = (shift: number) =>
      [-shift, shift]
        .map((away) => places.map((place) => place + away * 24))
        .filter((moved) => (moved[0] ?? 0) >= (ends[0] ?? 0) && (moved.at(-1) ?? 0) <= (ends[1] ?? 0))
        .map((moved) => moved.reduce((total, place) => total + (rows.get(place) ?? 0), 0));
    const ofWeeks = around(weeks);
    const others = ofWeeks.length > 0 ? ofWeeks : around(days);
    return others.length > 0 && others.every((total) => total >= ROWS_AT_LEAST);
  });
}

/** Hours of the clock since 1970-01-01. */
const placeOf = ({ day, hour }: HourOfLog): number => day * 24 + hour;

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
