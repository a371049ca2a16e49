import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { dateText, dayOfEpoch, daysText } from "../words/index.ts";
import { byGroup, type Grouping } from "./by-group.ts";
import { asCheck } from "./finding.ts";
import type { Check } from "./types.ts";

/** Do the units of every day split alike? A ramp of the allocation shows, and a fault of one day. */
export function allocationByDay(plan: Plan, reduction: Reduction): Check | null {
  const grouping = days(plan, reduction);
  if (grouping === null) return null;
  const findings = byGroup(plan, reduction, grouping);
  const [enrolled, analysed] = findings.map(({ figures }) => testOf(figures));
  return asCheck("allocation-by-day", findings, { ...enrolled, ...(analysed === undefined ? {} : { analysed }) });
}

const testOf = ({ chiSquare = 0, df = 0, p = 1 }: Check["figures"]) => ({ chiSquare, df, p });

/** The days of enrolment as a grouping; null in a log without time. */
export function days(plan: Plan, { facts }: Reduction): Grouping | null {
  const found = facts.soundness.days;
  if (found === null) return null;
  const dayAt = (place: number) => found[place]?.day ?? 0;
  return {
    about: (stage) => stage,
    groups: found.map(({ day, ended }) => ({ key: isoDay(day), ended })),
    everywhere: "on every day",
    at: (places) => `on ${daysText(places.map(dayAt))}`,
    elsewhere: "on all other days",
    remedy: (places) => {
      const { many } = plan.unitCalled;
      const isSome = places.length < found.length;
      const isStart = isSome && places.every((place, i) => place === i);
      const isEnd = isSome && places.every((place, i) => place === found.length - places.length + i);
      const which = isStart
        ? `only the days from ${dayText(dayAt(places.length))} on (enrolment: from)`
        : isEnd
          ? `only the days before ${dayText(dayAt(places[0] ?? 0))} (enrolment: before)`
          : "only the days of one allocation (enrolment: from, before)";
      return `If the allocation was changed during the test, count ${which}, and run the report again; if it was not, find out how ${many} were given a variant on ${daysText(places.map(dayAt))}.`;
    },
  };
}

const dayText = (day: number): string => dateText(dayOfEpoch(day));

/** "2026-03-09". */
function isoDay(day: number): string {
  const { year, month, day: date } = dayOfEpoch(day);
  return [String(year).padStart(4, "0"), String(month).padStart(2, "0"), String(date).padStart(2, "0")].join("-");
}
