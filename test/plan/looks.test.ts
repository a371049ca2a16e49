import { describe, expect, it } from "vitest";
import { planOf, planText } from "./plans.ts";

describe("planned looks", () => {
  const looksOf = (looks: string) => planOf(planText({ looks })).looks;

  it("are shares of the planned size, and the plan says which of them this one is", () => {
    expect(looksOf("looks: {planned: [25%, 0.5, 75 %, 100%], at: 3, spending: pocock}")).toEqual({
      planned: [0.25, 0.5, 0.75, 1],
      at: 3,
      spending: "pocock",
      reached: null,
    });
  });

  it("spend as O'Brien and Fleming do where the plan does not say, and may lie one percent apart", () => {
    expect(looksOf("looks: {planned: [0.98, 0.99, 1], at: 1}")?.spending).toBe("obrien-fleming");
  });
});

describe("incidents", () => {
  it("are read in the plan's zone, with the tests that the enrolling row must pass", () => {
    const incidents = `incidents:
  - {name: outage, from: 2026-03-04T08:00, before: 2026-03-05, where: {country: NO}, what: cards were refused}
  - {name: strike, from: 2026-03-07T08:00Z, before: 2026-03-07T09:00Z}`;
    const hour = (day: number, hours: number) => BigInt(Date.UTC(2026, 2, day, hours)) * 1000n;
    expect(planOf(planText({ timezone: "timezone: Europe/Oslo", incidents })).incidents).toEqual([
      {
        name: "outage",
        what: "cards were refused",
        fromUs: hour(4, 7), // Oslo is an hour ahead of UTC
        beforeUs: hour(4, 23),
        fromText: "2026-03-04T08:00",
        beforeText: "2026-03-05",
        where: [{ column: "country", kind: "in", values: [{ kind: "text", text: "NO" }] }],
      },
      {
        name: "strike",
        what: null,
        fromUs: hour(7, 8),
        beforeUs: hour(7, 9),
        fromText: "2026-03-07T08:00Z",
        beforeText: "2026-03-07T09:00Z",
        where: [],
      },
    ]);
  });

  it("come last among the columns, wherever they stand in the text: they decide no tie", () => {
    const incidents = "incidents: [{name: a, from: 2026-03-04, before: 2026-03-05, where: {country: NO, fare: 1}}]";
    const metrics = "metrics: [{name: A, role: primary, summary: mean, of: {sum: fare, where: {port: Oslo}}}]";
    expect(planOf(`${incidents}\n${planText({ metrics })}`).columns).toEqual(["visitor", "fare", "port", "country"]);
  });
});
