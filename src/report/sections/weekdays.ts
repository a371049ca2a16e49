import type { Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import { type Day, dateSpan, dateText, list } from "../../words/index.ts";

const NAMES = ["Monday", "Tuesday", "Wednesday", "Thursday", "Friday", "Saturday", "Sunday"] as const;

/** A day by its number since 1970-01-01. */
export function calendarDay(day: number): Day {
  const date = new Date(day * 86_400_000);
  return { year: date.getUTCFullYear(), month: date.getUTCMonth() + 1, day: date.getUTCDate() };
}

/** "4 March 2026". */
export const dayText = (day: number): string => dateText(calendarDay(day));

/** "2026-03-04". */
export const isoDay = (day: number): string => new Date(day * 86_400_000).toISOString().slice(0, 10);

/** How often each weekday was covered by the enrolment of those counted, in one sentence. */
export function weekdaysSentence(plan: Plan, { facts }: Reduction): string {
  const days = facts.analysedByDay.map(({ day }) => day);
  const [first, last] = [days[0], days.at(-1)];
  if (first === undefined || last === undefined) return `No ${plan.unitCalled.one} was counted.`;
  const when = `${plan.unitCalled.many} counted were enrolled on ${days.length} ${days.length === 1 ? "day" : "days"}, ${dateSpan(calendarDay(first), calendarDay(last))}`;
  const covered = NAMES.map((_, weekday) => days.filter((day) => weekdayOf(day) === weekday).length);
  const [least, most] = [Math.min(...covered), Math.max(...covered)];
  const said = least === most ? `each weekday ${times(least)}` : `${list(groups(covered))}`;
  return `${when[0]?.toUpperCase()}${when.slice(1)}: ${said}.`;
}

/** "Monday and Tuesday twice", "Sunday never". */
function groups(covered: readonly number[]): string[] {
  const counts = [...new Set(covered)].sort((a, b) => b - a);
  return counts.map((n) => `${list(NAMES.filter((_, weekday) => covered[weekday] === n))} ${times(n)}`);
}

const times = (n: number): string => (n === 0 ? "never" : n === 1 ? "once" : n === 2 ? "twice" : `${n} times`);

/** 1970-01-01 was a Thursday; Monday is 0. */
const weekdayOf = (day: number): number => (((day + 3) % 7) + 7) % 7;

/** What of time this report cannot tell, and why; nothing where it tells all. */
export function untoldOfTime({ log, followUp, unitCalled: { many } }: Plan): string[] {
  if (log.some(({ columns }) => columns.time === null)) {
    return [
      `The log has no times: how the differences came about as ${many} enrolled, and by day since enrolment, is not told.`,
    ];
  }
  return followUp === null || followUp.days < 2
    ? ["Differences by day since enrolment are not told: the plan has no follow-up of two days or more."]
    : [];
}
