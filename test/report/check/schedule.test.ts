import { describe, expect, it } from "vitest";
import type { Plan } from "../../../src/plan/types.ts";
import { scheduleOf } from "../../../src/report/check/schedule.ts";
import { scheduleSentences } from "../../../src/report/check/schedule-words.ts";
import { planOf, reductionOf } from "../../checks/make.ts";

const at = (text: string) => BigInt(Date.parse(text)) * 1000n;

/** 1,000 visitors from 2 to 12 March at noon: 100 a day. Dates are Oslo's, an hour ahead of these. */
const from = at("2026-03-02T12:00:00Z");
const until = at("2026-03-12T12:00:00Z");

function said(changes: Partial<Plan>, log: { end?: string; unfollowed?: number; kept?: boolean } = {}): string {
  const plan = planOf({ followUp: { days: 7, incomplete: "exclude" }, ...changes });
  const unfollowed = plan.followUp === null ? {} : { ended: { "follow-up": [log.unfollowed ?? 0, 0] } };
  const reduction = reductionOf(plan, {
    enrolled: [500, 500],
    ...unfollowed,
    facts: {
      logEndUs: at(log.end ?? "2026-03-12T20:00:00Z"),
      firstKeptUs: log.kept === false ? null : from,
      lastKeptUs: log.kept === false ? null : until,
    },
  });
  return scheduleSentences(plan, scheduleOf(plan, reduction)).join(" ");
}

const dates = (before: string | null): Partial<Plan> => ({
  enrolment: {
    event: null,
    fromUs: at("2026-03-01T23:00:00Z"),
    beforeUs: before === null ? null : at(before),
    fromText: null,
    beforeText: null,
    inTwoVariants: "first",
  },
});

describe("how far a test is", () => {
  it("gives the pace, and the day on which the planned size is reached at it", () => {
    // 500 more at 100 a day: 5 days after 12 March
    expect(said({ ...dates("2026-03-22T23:00:00Z"), plannedUnits: 1500 }, { unfollowed: 400 })).toBe(
      [
        "The log holds rows until 12 March 2026.",
        // 1,500 in the 21 days to 22 March
        "1,000 visitors were enrolled from 2 until 12 March 2026, 100 a day (the plan\u2019s size and dates mean 71). By the plan enrolment goes on until 22 March 2026.",
        "The plan asked for 1,500: enrolled are 1,000 (66.7%); at this pace the planned size is reached on 17 March 2026, before enrolment ends.",
        "The last visitor that the plan lets in is followed for all of 7 days on 30 March 2026; so far 600 of 1,000 visitors are.",
      ].join(" "),
    );
  });

  it("says how many there will be where the pace falls short of the planned size", () => {
    // 4.458 days from 12 March noon to the end of 16 March: 446 more
    expect(said({ ...dates("2026-03-16T23:00:00Z"), plannedUnits: 3000 })).toContain(
      "at this pace about 1,446 visitors are enrolled when enrolment ends, and the planned size would be reached on 1 April 2026.",
    );
  });

  it("says that the planned size will not be reached once enrolment is over", () => {
    const text = said({ ...dates("2026-03-12T18:00:00Z"), plannedUnits: 3000 }, { end: "2026-03-20T00:00:00Z" });
    expect(text).toContain("enrolled are 1,000 (33.3%), and enrolment is over: the planned size will not be reached.");
    expect(text).toContain("Every visitor is followed for all of 7 days.");
  });

  it("counts follow-up from the planned size where the plan sets no last day, and else from the last enrolled", () => {
    expect(said({ plannedUnits: 1200 })).toContain(
      "The last visitor of the planned size is followed for all of 7 days on 21 March 2026",
    );
    expect(said({})).toContain("The last visitor enrolled so far is followed for all of 7 days on 19 March 2026");
    expect(said({})).toContain("The plan sets no last day of enrolment. The plan states no size to be reached.");
  });

  it("says so where nobody is enrolled yet, where there is no follow-up, and where the log has no time", () => {
    expect(said(dates("2026-03-22T23:00:00Z"), { kept: false })).toContain(
      "No visitor is enrolled yet that would be counted. By the plan enrolment goes on until 22 March 2026.",
    );
    expect(said({ followUp: null })).toContain("The plan has no follow-up of a set length");
    const plan = planOf({ plannedUnits: 5000 });
    expect(scheduleSentences(plan, scheduleOf(plan, reductionOf(plan))).join(" ")).toBe(
      "The log has no time, or no row that can be used, so nothing can be said of dates. 2,000 visitors would be counted; the plan asked for 5,000.",
    );
  });
});
