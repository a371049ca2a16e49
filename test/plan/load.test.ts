import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import type { Plan } from "../../src/plan/index.ts";
import { planOf, planText } from "./plans.ts";

const FULL = readFileSync(new URL("fixtures/fare-calendar.yaml", import.meta.url), "utf8");
const count = { kind: "count" } as const;
const metricDefaults = {
  role: "secondary",
  per: null,
  quantile: null,
  unitOfMeasure: null,
  goodIs: "higher",
  worthwhile: null,
  expected: null,
  margin: null,
  cap: null,
  adjustFor: null,
  withoutRows: "zero",
} as const;

describe("a plan", () => {
  it("comes out as written, every key of it", () => {
    const expected: Plan = {
      experiment: "Fare calendar on the search page",
      question: "Does a month of fares at a glance raise bookings?",
      unitCalled: { one: "visitor", many: "visitors" },
      log: [
        {
          files: ["data/*.csv.gz"],
          columns: { unit: "visitor", time: "at", event: "event", variant: "arm", eventId: "id" },
        },
      ],
      timezone: "Europe/Oslo",
      enrolment: {
        event: "search_opened",
        fromUs: BigInt(Date.UTC(2026, 2, 1, 23)) * 1000n, // midnight in Oslo, an hour ahead of UTC
        beforeUs: BigInt(Date.UTC(2026, 2, 15, 23)) * 1000n,
        fromText: "2026-03-02",
        beforeText: "2026-03-16",
        inTwoVariants: "first",
      },
      variants: [
        { name: "list", what: "dates in a list", isControl: true, allocation: 1 },
        { name: "calendar", what: "a month of fares at a glance", isControl: false, allocation: 1 },
      ],
      followUp: { days: 7, incomplete: "exclude" },
      metrics: [
        {
          ...metricDefaults,
          name: "Booked",
          role: "primary",
          summary: "proportion",
          of: { event: "booking", where: [], aggregate: count },
          worthwhile: { kind: "relative", value: 0.05 },
          expected: { kind: "relative", value: 0.08 },
        },
        {
          ...metricDefaults,
          name: "Fare per visitor",
          summary: "mean",
          of: { event: "booking", where: [], aggregate: { kind: "sum", column: "fare" } },
          unitOfMeasure: "kr",
          cap: { kind: "quantile", q: "0.999" },
        },
        {
          ...metricDefaults,
          name: "Bookings per search",
          summary: "ratio-of-totals",
          of: { event: "booking", where: [], aggregate: count },
          per: { event: "search_opened", where: [], aggregate: count },
        },
        {
          ...metricDefaults,
          name: "Longest page time",
          summary: "mean",
          of: {
            event: "page_view",
            where: [
              { column: "page", kind: "matches", patterns: ["search*", "fares"] },
              { column: "seconds", kind: "above", value: "0" },
              { column: "seconds", kind: "at-most", value: "3600" },
            ],
            aggregate: { kind: "max", column: "seconds" },
          },
          withoutRows: "leave-out",
        },
        {
          ...metricDefaults,
          name: "Support contacts",
          role: "guardrail",
          summary: "mean",
          of: { event: "support_contact", where: [], aggregate: count },
          goodIs: "lower",
          margin: { kind: "relative", value: 0.05 },
        },
      ],
      filters: [
        {
          name: "staff accounts",
          why: "staff book for training",
          drop: "units",
          when: "at-enrolment",
          where: [{ column: "is_staff", kind: "in", values: [{ kind: "boolean", value: true }] }],
        },
        { name: "load test", why: null, drop: "units", listedIn: "load_test_ids.csv" },
      ],
      subgroups: [],
      askedAfterwards: { subgroups: [], metrics: [], columns: [], numericColumns: [] },
      decision: { confidence: 0.95, power: 0.8, adoptWhen: "shown-better", primaries: "all", interval: "normal" },
      plannedUnits: 100000,
      looks: null,
      incidents: [],
      forecast: null,
      registered: null,
      texts: {
        ended: "the planned two weeks were over",
        owner: "search team",
        link: "https://ferries.example/fare-calendar",
        limits: "other seasons than March, and visitors who return after more than 7 days",
        notes: "the map view was switched off for everyone",
        decided: { what: "adopted", by: "search team", on: "2026-03-27", because: "as the report says" },
      },
      columns: ["visitor", "id", "fare", "seconds", "page", "is_staff"],
      numericColumns: ["fare", "seconds"],
    };
    expect(planOf(FULL)).toEqual(expected);
  });

  it("needs no more than what DESIGN 4 requires, and takes its defaults for the rest", () => {
    expect(planOf(planText())).toEqual({
      experiment: "Fare calendar",
      question: "Does it raise bookings?",
      unitCalled: { one: "unit", many: "units" },
      log: [
        {
          files: ["data/*.csv"],
          columns: { unit: "visitor", time: "at", event: "event", variant: "arm", eventId: null },
        },
      ],
      timezone: "UTC",
      enrolment: {
        event: null,
        fromUs: null,
        beforeUs: null,
        fromText: null,
        beforeText: null,
        inTwoVariants: "first",
      },
      variants: [
        { name: "list", what: null, isControl: true, allocation: 1 },
        { name: "calendar", what: null, isControl: false, allocation: 1 },
      ],
      followUp: null,
      metrics: [
        {
          ...metricDefaults,
          name: "Booked",
          role: "primary",
          summary: "proportion",
          of: { event: "booking", where: [], aggregate: count },
        },
      ],
      filters: [],
      subgroups: [],
      askedAfterwards: { subgroups: [], metrics: [], columns: [], numericColumns: [] },
      decision: { confidence: 0.95, power: 0.8, adoptWhen: "shown-better", primaries: "all", interval: "normal" },
      plannedUnits: null,
      looks: null,
      incidents: [],
      forecast: null,
      registered: null,
      texts: { ended: null, owner: null, link: null, limits: null, notes: null, decided: null },
      columns: ["visitor"],
      numericColumns: [],
    });
  });

  it("may be a table with one row a unit, without events and without time", () => {
    const plan = planOf(
      planText({
        log: "log: [{files: [a.parquet, b.tsv.zst], columns: {unit: store, variant: arm}}]",
        metrics: `metrics:
  - {name: Revenue, role: primary, summary: mean, of: {sum: revenue}}
  - {name: Hired, summary: proportion, of: {where: {hired: 1}}}
  - {name: Rows, summary: mean, of: {}}`,
      }),
    );
    expect(plan.log[0]?.files).toEqual(["a.parquet", "b.tsv.zst"]);
    expect(plan.metrics.map(({ of }) => of)).toEqual([
      { event: null, where: [], aggregate: { kind: "sum", column: "revenue" } },
      {
        event: null,
        where: [{ column: "hired", kind: "in", values: [{ kind: "number", value: "1" }] }],
        aggregate: count,
      },
      { event: null, where: [], aggregate: count },
    ]);
  });
});

describe("columns", () => {
  it("stand in the order in which the text names them first, not in that of the schema", () => {
    const filters = `filters:
  - {name: robots, drop: rows, where: {agent: bot*, fare: {above: 9}}}`;
    const metrics = `metrics:
  - name: Fares
    summary: ratio-of-totals
    of: {where: {harbour: Oslo}, sum: fare}
    per: {sum: seats}
    role: primary`;
    const log = `log:
  - columns: {event-id: row, time: at, event: event, unit: visitor, variant: arm}
    files: data/*.csv
  - columns: {unit: customer, time: at}
    files: more.csv`;
    const plan = planOf(`${filters}\n${metrics}\n${planText({ metrics: "", log })}`);
    expect(plan.columns).toEqual(["agent", "fare", "harbour", "seats", "row", "visitor", "customer"]);
    expect(plan.numericColumns).toEqual(["fare", "seats"]);
  });

  it("include the time, event and variant columns where a `where` names them too", () => {
    const filters = "filters: [{name: late, drop: rows, where: {at: 2026-*, arm: list}}]";
    expect(planOf(planText({ filters })).columns).toEqual(["visitor", "at", "arm"]);
  });

  it("may have any name, digits and words of JavaScript among them", () => {
    const filters =
      "filters: [{name: odd, drop: rows, where: {constructor: a, 0123: b, true: c, 'a: b': d, toString: e}}]";
    expect(planOf(planText({ filters })).columns).toEqual([
      "visitor",
      "constructor",
      "0123",
      "true",
      "a: b",
      "toString",
    ]);
  });
});

describe("the text", () => {
  it("may begin with a byte order mark and end its lines as Windows does", () => {
    expect(planOf(`\uFEFF${planText().replaceAll("\n", "\r\n")}`)).toEqual(planOf(planText()));
  });

  it("may be JSON, which is YAML too", () => {
    const json = JSON.stringify({
      experiment: "Fare calendar",
      question: "Does it raise bookings?",
      log: [{ files: "data/*.csv", columns: { unit: "visitor", time: "at", event: "event", variant: "arm" } }],
      variants: [{ name: "list", control: true }, { name: "calendar" }],
      metrics: [{ name: "Booked", role: "primary", summary: "proportion", of: { event: "booking" } }],
    });
    expect(planOf(json)).toEqual(planOf(planText()));
  });

  it("may say a thing once and name it again", () => {
    const metrics = `metrics:
  - {name: A, role: primary, summary: mean, of: &part {event: b, sum: fare, where: {x: {above: 1.50}}}, cap: {at: &cap 0500}}
  - {name: B, summary: mean, of: *part, cap: {at: *cap}}`;
    const [a, b] = planOf(planText({ metrics })).metrics;
    expect(b?.of).toEqual(a?.of);
    expect(b?.cap).toEqual({ kind: "at", at: "500" });
  });

  it("is read by YAML 1.2 whatever version it claims", () => {
    expect(planOf(`%YAML 1.1\n---\n${planText({ notes: "notes: yes" })}`).texts.notes).toBe("yes");
  });
});
