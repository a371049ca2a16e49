import type { Plan } from "../../plan/types.ts";
import { count, dateSpan, dateText, percent, plural } from "../../words/index.ts";
import { dayOf } from "../plan-words.ts";
import type { Schedule } from "./schedule.ts";

/** How far the test is, in sentences: rows, enrolment, planned size, follow-up. */
export function scheduleSentences(plan: Plan, schedule: Schedule): string[] {
  if (schedule.logEndUs === null) {
    const { kept, planned } = schedule;
    const { one, many } = plan.unitCalled;
    return [
      "The log has no time, or no row that can be used, so nothing can be said of dates.",
      planned === null
        ? `${plural(kept, one, many)} would be counted.`
        : `${plural(kept, one, many)} would be counted; the plan asked for ${count(planned)}.`,
    ];
  }
  return [rows(plan, schedule), enrolment(plan, schedule), size(plan, schedule), followUp(plan, schedule)].filter(
    (sentence) => sentence !== "",
  );
}

const on = (us: bigint, plan: Plan) => dateText(dayOf(us, plan.timezone));

function rows(plan: Plan, { logEndUs }: Schedule): string {
  return logEndUs === null ? "" : `The log holds rows until ${on(logEndUs, plan)}.`;
}

/** A date that is excluded: the day before is the last. */
const lastDay = (us: bigint, plan: Plan) => on(us - 1n, plan);

function enrolment(plan: Plan, { firstUs, lastUs, kept, perDay, plannedPerDay, isOpen, endsUs }: Schedule): string {
  const { one, many } = plan.unitCalled;
  const end =
    endsUs === null
      ? " The plan sets no last day of enrolment."
      : isOpen === true
        ? ` By the plan enrolment goes on until ${lastDay(endsUs, plan)}.`
        : ` By the plan enrolment ended on ${lastDay(endsUs, plan)}.`;
  if (firstUs === null || lastUs === null) return `No ${one} is enrolled yet that would be counted.${end}`;
  const from = `${plural(kept, one, many)} ${kept === 1 ? "was" : "were"} enrolled from ${dateSpan(dayOf(firstUs, plan.timezone), dayOf(lastUs, plan.timezone)).replace(" to ", " until ")}`;
  const pace = perDay === null ? "" : `, ${paceText(perDay)} a day`;
  const instead = plannedPerDay === null ? "" : ` (the plan\u2019s size and dates mean ${paceText(plannedPerDay)})`;
  return `${from}${pace}${perDay === null ? "" : instead}.${end}`;
}

/** Three digits of a pace say enough. */
const paceText = (perDay: number): string =>
  perDay >= 10 ? count(Math.round(Number(perDay.toPrecision(3)))) : String(Number(perDay.toPrecision(2)));

function size(
  plan: Plan,
  { planned, kept, plannedReachedUs, keptByEnd, isOpen, endsUs, followed, perDay }: Schedule,
): string {
  if (planned === null) return "The plan states no size to be reached.";
  const { many } = plan.unitCalled;
  const asked = `The plan asked for ${count(planned)}`;
  if (kept >= planned) {
    const still =
      followed !== null && followed < planned ? `, ${count(followed)} of them followed to the end so far` : "";
    return `${asked}: enrolled are ${count(kept)}, so the planned size is reached${still}.`;
  }
  const so = `${asked}: enrolled are ${count(kept)} (${percent(kept / planned)})`;
  if (isOpen === false) return `${so}, and enrolment is over: the planned size will not be reached.`;
  if (plannedReachedUs === null || perDay === null) return `${so}; a pace cannot be told yet.`;
  const reached = `at this pace the planned size is reached on ${on(plannedReachedUs, plan)}`;
  if (keptByEnd === null || endsUs === null) return `${so}; ${reached}.`;
  if (keptByEnd >= planned) return `${so}; ${reached}, before enrolment ends.`;
  return `${so}; at this pace about ${count(keptByEnd)} ${many} are enrolled when enrolment ends, and the planned size would be reached on ${on(plannedReachedUs, plan)}.`;
}

function followUp(
  plan: Plan,
  { followUpCompleteUs, logEndUs, kept, followed, isOpen, plannedReachedUs }: Schedule,
): string {
  if (plan.followUp === null) {
    return "The plan has no follow-up of a set length: rows count from enrolment on, until the log ends.";
  }
  if (followUpCompleteUs === null || logEndUs === null) return "";
  const { one, many } = plan.unitCalled;
  const days = plural(plan.followUp.days, "day", "days");
  if (isOpen !== true && followUpCompleteUs <= logEndUs) return `Every ${one} is followed for all of ${days}.`;
  const soFar = followed === null ? "" : `; so far ${count(followed)} of ${plural(kept, one, many)} are`;
  const last =
    isOpen === true
      ? `The last ${one} that the plan lets in`
      : plannedReachedUs !== null
        ? `The last ${one} of the planned size`
        : `The last ${one} enrolled so far`;
  return `${last} is followed for all of ${days} on ${on(followUpCompleteUs, plan)}${soFar}.`;
}
