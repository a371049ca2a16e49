import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { dayOfEpoch, daysText } from "../words/index.ts";
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
      const changed = "If the allocation was changed during the test, count the days of one allocation only";
      const isStart = places.length < found.length && places.every((place, i) => place === i);
      const isEnd =
        places.length < found.length && places.every((place, i) => place === found.length - places.length + i);
      const from = isStart ? ` (enrolment, from: ${isoDay(dayAt(places.length))})` : "";
      const before = isEnd ? ` (enrolment, before: ${isoDay(dayAt(places[0] ?? 0))})` : "";
      return `${changed}${from || before}, and run the report again; if it was not, find out how ${many} were given a variant ${`on ${daysText(places.map(dayAt))}`}.`;
    },
  };
}

/** "2026-03-09". */
function isoDay(day: number): string {
  const { year, month, day: date } = dayOfEpoch(day);
  return [String(year).padStart(4, "0"), String(month).padStart(2, "0"), String(date).padStart(2, "0")].join("-");
}
