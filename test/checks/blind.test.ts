import { describe, expect, it } from "vitest";
import { BEFORE_THE_END, blindChecks, checks } from "../../src/checks/index.ts";
import { TITLES } from "../../src/report/sections/checks.ts";
import { metricOf, planOf, reductionOf, unitFilter } from "./make.ts";

describe("what of the checks may be seen before the end", () => {
  it("is decided for every check that there is", () => {
    expect(Object.keys(BEFORE_THE_END).sort()).toEqual(Object.keys(TITLES).sort());
  });

  const plan = planOf({
    followUp: { days: 7, incomplete: "exclude" },
    filters: [unitFilter("robots", "ever")],
    metrics: [
      metricOf({ name: "Booked", role: "primary" }),
      metricOf({ name: "Fare", summary: "mean", withoutRows: "leave-out" }),
    ],
  });
  const log = reductionOf(plan, {
    enrolled: [1000, 1000],
    ended: { "follow-up": [300, 300], "filter:robots": [3, 90] },
    leftOut: { Fare: [100, 400] },
    rows: { rejected: 700, duplicate: 300 },
    facts: { withRejected: [100, 500], withDuplicate: [100, 200], switched: [10, 90], duplicateIds: 300 },
  });
  const blind = blindChecks(plan, log);
  const full = checks(plan, log);
  const of = (id: string) => blind.find((check) => check.id === id);

  it("shows the checks that are whole as they are in the report, and no other but those for all together", () => {
    for (const check of blind) expect(["whole", "together"]).toContain(BEFORE_THE_END[check.id]);
    for (const id of ["allocation", "filters", "unknown-variants", "never-occurs"]) {
      expect(of(id)).toEqual(full.find((check) => check.id === id));
    }
    expect(of("follow-up")).toBeUndefined();
  });

  it("gives rejected rows, copies, units seen in two and values left out for all variants together", () => {
    for (const id of ["rejected", "duplicates", "switched", "without-rows"]) {
      expect(full.find((check) => check.id === id)?.parts.some(({ sentence }) => sentence.includes('"calendar"'))).toBe(
        true,
      );
      expect(JSON.stringify(of(id))).not.toMatch(/list|calendar/);
    }
    expect(of("rejected")).toMatchObject({ result: "fail", figures: { rows: 700 } });
    expect(of("switched")).toMatchObject({ figures: { units: 100 } });
    // 500 of the 1,307 left on the line of the counted
    expect(of("without-rows")?.parts[0]?.figures).toEqual({ units: 500, share: 500 / 1307 });
  });

  it("points to the rejected rows that lie beside the check", () => {
    expect(of("rejected")?.remedy).toContain("check-rejects.csv");
    expect(full.find((check) => check.id === "rejected")?.remedy).toContain("in rejects.csv");
  });
});
