import { describe, expect, it } from "vitest";
import { reduced } from "./small.ts";

/** Days with an event, counted over a long follow-up. */
function plan(days: number, timezone: string): string {
  return `experiment: Long
question: How many days?
timezone: ${timezone}
log: [{files: log.csv, columns: {unit: visitor, time: at, event: event, variant: arm}}]
enrolment: {event: search}
variants: [{name: list, control: true}, {name: calendar}]
follow-up: {days: ${days}, incomplete: keep}
metrics: [{name: Days, role: primary, summary: mean, of: {event: visit, days: true}}]
`;
}

async function days(followUp: number, timezone: string, enrolled: string, visits: readonly string[]): Promise<string> {
  const rows = visits.map((at) => `v1,${at},visit,`);
  const text = ["visitor,at,event,arm", `v1,${enrolled},search,list`, ...rows, ""].join("\n");
  return (await reduced(plan(followUp, timezone), { "log.csv": text })).arms[0]?.[0] ?? "";
}

describe("days with a counted row", () => {
  // 24-hour days of follow-up touch one local day more than their number, and a spring night of 23 hours yet another.
  it.each([61, 61.99, 62, 62.5, 90])("are counted to the last one of a follow-up of %s days", async (followUp) => {
    const last = new Date(Date.parse("2026-02-01T22:59:00Z") + followUp * 86_400_000 - 60_000).toISOString();
    expect(
      await days(followUp, "Europe/Oslo", "2026-02-01T23:59", [
        "2026-02-01T23:59:30",
        "2026-02-03",
        "2026-02-03T12:00",
        last,
      ]),
    ).toBe("1: 3");
  });
  it.each([61, 61.99, 62, 90])(
    "go over a day that the calendar skipped, with a follow-up of %s days",
    async (followUp) => {
      const last = new Date(Date.parse("2011-11-02T09:59:00Z") + followUp * 86_400_000 - 60_000).toISOString();
      const skipped = ["2011-12-29T23:00", "2011-12-31T01:00"];
      expect(await days(followUp, "Pacific/Apia", "2011-11-01T23:59", [...skipped, last])).toBe("1: 3");
    },
  );
  it("are local days: an hour that occurs twice is of one of them", async () => {
    const visits = ["2026-10-25T00:30Z", "2026-10-25T01:30Z", "2026-10-25T22:30Z", "2026-10-25T23:30Z"];
    expect(await days(7, "Europe/Oslo", "2026-10-24T10:00", visits)).toBe("1: 2");
  });
  it("are none outside the follow-up, whose end is not part of it", async () => {
    const visits = ["2026-03-01T09:59:59.999999", "2026-03-01T10:00", "2026-03-08T09:59:59.999999", "2026-03-08T10:00"];
    expect(await days(7, "UTC", "2026-03-01T10:00", visits)).toBe("1: 2");
  });
  // Readers saw the run stop with an error of the engine, once units had enrolled a month and more after the log's start.
  it("are counted from the unit's own enrolment, however long after the log's first row that is", async () => {
    const rows = ["v0,2026-01-01,search,list", "v1,2026-03-20T10:00,search,list"];
    const visits = ["2026-03-20T11:00", "2026-03-22T09:00", "2026-03-22T21:00"].map((at) => `v1,${at},visit,`);
    const text = ["visitor,at,event,arm", ...rows, ...visits, ""].join("\n");
    expect((await reduced(plan(7, "UTC"), { "log.csv": text })).arms[0]?.[0]).toBe("2: 2");
  });
});
