import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { plural } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import type { Check } from "./types.ts";

const DAY_US = 86_400_000_000;
const WEEK = 7;

/**
 * Does enrolment cover whole weeks? From the first to the last enrolment of a counted unit, to the nearest whole day of 24
 * hours: a weekday that counts once more than another weighs the result towards the people of that day.
 */
export function weeks(plan: Plan, { facts }: Reduction): Check | null {
  const { firstEnrolledUs, lastEnrolledUs } = facts;
  if (firstEnrolledUs === null || lastEnrolledUs === null) return null;
  const finding = judge(plan, Math.round(Number(lastEnrolledUs - firstEnrolledUs) / DAY_US));
  return asCheck("weeks", [finding], finding.figures);
}

function judge({ unitCalled: { many } }: Plan, days: number): Finding {
  const [whole, over] = [Math.floor(days / WEEK), days % WEEK];
  const figures = { days };
  const weeks = plural(whole, "week", "weeks");
  if (whole > 0 && over === 0) {
    return passed("days", `The ${many} counted were enrolled over ${weeks}, to the nearest day.`, figures);
  }
  const length =
    days === 0
      ? "less than a day"
      : whole === 0
        ? plural(days, "day", "days")
        : `${weeks} and ${plural(over, "day", "days")}`;
  const unlike =
    whole === 0 ? "not every day of the week is in it" : "some days of the week are in it more often than others";
  return {
    about: "days",
    result: "caution",
    strong: false,
    sentence: `The ${many} counted were enrolled over ${length}: ${unlike}.`,
    remedy: `Where ${many} of some days of the week differ, read the result as one about these days. Let the next test enrol for whole weeks.`,
    figures,
  };
}
