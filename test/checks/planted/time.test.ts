import { describe, expect, it } from "vitest";
import { DAY, enrolled, judged, later, planText, timeText } from "./log.ts";

describe("planted rows outside the span", () => {
  const rows = [...enrolled("list", 500), ...enrolled("calendar", 500)];
  // The last row is at 14 days less 20 minutes; a gap of more than 7 days ends the span.
  it.each([
    [7, "pass"],
    [7.1, "caution"],
  ])("%f days after the others are a %s", async (days, result) => {
    const [last] = rows.slice(-1);
    if (last === undefined) throw new Error("no rows");
    const stray = later([last], "booking", days * DAY);
    const found = (await judged(planText(), { rows: [...rows, ...stray] })).find("span");
    expect(found?.result).toBe(result);
    expect(found?.figures).toEqual({ rows: result === "pass" ? 0 : 1 });
    if (result === "caution")
      expect(found?.sentence).toContain("1 row of 1,001 (0.100%) lies outside 2 to 15 March 2026");
  });
});

describe("planted visitors not followed to the end", () => {
  /** 900 enrolled early, two exactly 7 days before the log ends, the others later. */
  const log = (late: number) => {
    const early = [...enrolled("list", 450, 0, 13), ...enrolled("calendar", 450, 0, 13)];
    const end = { visitor: "list 0 0", at: timeText(21 * DAY), event: "booking" };
    const exactly = [...enrolled("list", 1, 14, 14.00001), ...enrolled("calendar", 1, 14, 14.00001)];
    return [
      ...early,
      ...exactly,
      ...enrolled("list", late / 2, 14.5, 15.5),
      ...enrolled("calendar", late / 2, 14.5, 15.5),
      end,
    ];
  };
  // METHODS 7: over 10% cautions; 100 of 1,002 is not over, 102 of 1,004 is
  it.each([
    [100, "exclude", "pass"],
    [102, "exclude", "caution"],
    [100, "keep", "pass"],
    [102, "keep", "caution"],
  ])("%i beside 902, under %s, are a %s", async (late, incomplete, result) => {
    const plan = planText({ rest: `follow-up: {days: 7, incomplete: ${incomplete}}` });
    const found = (await judged(plan, { rows: log(late) })).find("follow-up");
    expect(found?.result).toBe(result);
    expect(found?.figures).toMatchObject({ units: late });
  });

  it("are compared between the groups where they are kept", async () => {
    const plan = planText({ rest: "follow-up: {days: 7, incomplete: keep}" });
    const rows = [...log(0), ...enrolled("list", 5, 14.5, 15.5), ...enrolled("calendar", 45, 14.5, 15.5)];
    const found = (await judged(plan, { rows })).find("follow-up");
    expect(found?.parts.map(({ about, result }) => [about, result])).toEqual([
      ["units", "pass"],
      ["by variant", "caution"],
    ]);
  });
});

describe("planted weeks", () => {
  it.each([
    [7, "pass"],
    [14, "pass"],
    [13.6, "pass"],
    [13.4, "caution"],
    [15, "caution"],
    [6, "caution"],
    [0.3, "caution"],
  ])("%f days of enrolment are a %s", async (days, result) => {
    const rows = [...enrolled("list", 1000, 0, days), ...enrolled("calendar", 1000, 0, days)];
    expect((await judged(planText(), { rows })).find("weeks")?.result).toBe(result);
  });

  it("say which days are in it more often", async () => {
    const of = async (days: number) => {
      const rows = [...enrolled("list", 1000, 0, days), ...enrolled("calendar", 1000, 0, days)];
      return (await judged(planText(), { rows })).find("weeks")?.sentence;
    };
    expect(await of(10)).toBe(
      "The visitors counted were enrolled over 1 week and 3 days: some days of the week are in it more often than others.",
    );
    expect(await of(3)).toBe("The visitors counted were enrolled over 3 days: not every day of the week is in it.");
  });
});

describe("a planted early end", () => {
  const rows = [...enrolled("list", 500), ...enrolled("calendar", 500)];
  it.each([
    [1000, "pass"],
    [1001, "caution"],
  ])("of 1,000 counted where %i were planned is a %s", async (planned, result) => {
    const found = (await judged(planText({ rest: `planned: {units: ${planned}}` }), { rows })).find("stopped-early");
    expect(found?.result).toBe(result);
    expect(found?.figures).toMatchObject({ units: 1000, planned });
  });

  it("says why it ended where the plan does", async () => {
    const of = async (rest: string) =>
      (await judged(planText({ rest: `planned: {units: 4000}\n${rest}` }), { rows })).find("stopped-early");
    expect((await of(""))?.sentence).toBe(
      "The test ended at 25.0% of its planned size, and no earlier look was planned: 1,000 visitors were counted; the plan asked for 4,000. The plan does not say why it ended.",
    );
    expect((await of("ended: the season was over"))?.sentence).not.toContain("why it ended");
  });

  // a report at the second of three planned looks said "no earlier look was planned"
  it("is none at a look that was planned, and is one where the last came too early", async () => {
    const at = async (look: number) =>
      (
        await judged(planText({ rest: `planned: {units: 4000}\nlooks: {planned: [25%, 100%], at: ${look}}` }), { rows })
      ).find("stopped-early");
    expect(await at(1)).toMatchObject({
      result: "pass",
      sentence:
        "This is look 1 of 2 that were planned, at 25.0% of the planned size: 1,000 visitors were counted; the plan asked for 4,000.",
    });
    expect(await at(2)).toMatchObject({
      result: "caution",
      sentence:
        "The last of the 2 planned looks came at 25.0% of the planned size: 1,000 visitors were counted; the plan asked for 4,000. The plan does not say why it ended.",
      remedy:
        "If it was ended for what the figures showed, they overstate the difference. State why it ended (ended), and next time wait for the planned size.",
    });
  });
});

describe("a log without time", () => {
  it("has none of these checks", async () => {
    const plan = planText({
      columns: "unit: visitor, variant: arm",
      enrolment: "",
      metrics: "  - {name: Robots, role: primary, summary: proportion, of: {where: {robot: yes}}}",
    });
    const rows = [...enrolled("list", 20), ...enrolled("calendar", 20)];
    const ids = (await judged(plan, { rows })).checks.map(({ id }) => id);
    for (const id of ["allocation-by-day", "gaps", "span", "follow-up", "weeks"]) expect(ids).not.toContain(id);
  });
});
