import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { planOf, planText } from "./plans.ts";

/** The keys with which a plan asks for more than plain contrasts; what they mean is DESIGN 4 and METHODS 1 and 2. */

const metricOf = (rest: string) => {
  const metrics = `metrics:
  - {name: Booked, role: primary, summary: proportion, of: {event: booking}}
  - {name: M, ${rest}}`;
  return planOf(planText({ metrics })).metrics[1];
};

describe("a quantile", () => {
  it.each([
    ["0.95", "0.95"],
    ["95%", "0.95"],
    ["99.9 %", "0.999"],
    [".5", "0.5"],
    ["5e-1", "0.5"],
    ["0.90000000000000000001", "0.90000000000000000001"],
    ["1e-30", "0.000000000000000000000000000001"],
  ])("may be written %s, and keeps its digits", (written, quantile) => {
    expect(metricOf(`summary: quantile, quantile: ${written}, of: {sum: x}`)?.quantile).toBe(quantile);
  });

  it("is none for every other summary", () => {
    expect(metricOf("summary: mean, of: {sum: x}, cap: {quantile: 0.99}")?.quantile).toBeNull();
  });

  it.each([
    ["{event: page}", "", { kind: "count" }, "zero"],
    ["{days: true}", "", { kind: "days" }, "zero"],
    ["{sum: x}", ", without-rows: leave-out", { kind: "sum", column: "x" }, "leave-out"],
    ["{max: x}", ", without-rows: leave-out", { kind: "max", column: "x" }, "leave-out"],
    ["{min: x}", ", without-rows: 0", { kind: "min", column: "x" }, "zero"],
    ["{first: x}", ", without-rows: 0", { kind: "first", column: "x" }, "zero"],
    ["{last: x}", ", without-rows: leave-out", { kind: "last", column: "x" }, "leave-out"],
  ])("is of what a mean may be of: %s%s", (of, withoutRows, aggregate, becomes) => {
    const metric = metricOf(`summary: quantile, quantile: 0.5, of: ${of}${withoutRows}`);
    expect(metric).toMatchObject({ summary: "quantile", of: { aggregate }, per: null, withoutRows: becomes });
  });
});

describe("a covariate", () => {
  it("is the same quantity in the days before enrolment, of a mean or of a proportion", () => {
    expect(metricOf("summary: mean, of: {sum: x}, adjust-for: {days-before: 14}")?.adjustFor).toEqual({
      kind: "days-before",
      days: 14,
    });
    expect(metricOf("summary: proportion, of: {event: b}, adjust-for: {days-before: 0.5}")?.adjustFor).toEqual({
      kind: "days-before",
      days: 0.5,
    });
  });

  it.each(["max", "min", "first", "last"])("may be the %s of the days before", (aggregate) => {
    const rest = `summary: mean, of: {${aggregate}: x}, without-rows: leave-out, adjust-for: {days-before: 7}`;
    expect(metricOf(rest)?.adjustFor).toEqual({ kind: "days-before", days: 7 });
  });

  it("is none unless the plan says one", () => {
    expect(metricOf("summary: mean, of: {sum: x}")?.adjustFor).toBeNull();
  });

  it("may be a column, which then holds numbers and has its place among the columns by first mention", () => {
    const metrics = `metrics:
  - {name: A, adjust-for: {column: past}, role: primary, summary: proportion, of: {event: b, where: {page: x}}}
  - {name: B, summary: mean, of: {sum: fare}, adjust-for: {column: seats}}
  - {name: C, summary: mean, of: {event: b, where: {seats: 2}}}`;
    const plan = planOf(planText({ metrics }));
    expect(plan.metrics.map(({ adjustFor }) => adjustFor)).toEqual([
      { kind: "column", column: "past" },
      { kind: "column", column: "seats" },
      null,
    ]);
    expect(plan.columns).toEqual(["visitor", "past", "page", "fare", "seats"]);
    expect(plan.numericColumns).toEqual(["past", "fare", "seats"]);
  });

  it("may be a column in a log without time", () => {
    const plan = planOf(
      planText({
        log: "log: [{files: a.csv, columns: {unit: store, variant: arm}}]",
        metrics: "metrics: [{name: R, role: primary, summary: mean, of: {sum: now}, adjust-for: {column: before}}]",
      }),
    );
    expect(plan.metrics[0]?.adjustFor).toEqual({ kind: "column", column: "before" });
  });
});

describe("the decision", () => {
  it.each([
    ["{}", "all", "normal"],
    ["{primaries: all, interval: normal}", "all", "normal"],
    ["{primaries: any}", "any", "normal"],
    ["{interval: skew-corrected}", "all", "skew-corrected"],
  ])("as %s asks for %s of the primaries by the %s interval", (decision, primaries, interval) => {
    expect(planOf(planText({ decision: `decision: ${decision}` })).decision).toMatchObject({ primaries, interval });
  });
});

it("a forecast is how many units enrol in a month, or none", () => {
  expect(planOf(planText({ forecast: "forecast: {units-per-month: 30000}" })).forecast).toEqual({
    unitsPerMonth: 30000,
  });
  expect(planOf(planText()).forecast).toBeNull();
});

it("the whole format comes out with all of these", () => {
  const whole = readFileSync(new URL("fixtures/whole-format.yaml", import.meta.url), "utf8");
  const plan = planOf(whole);
  expect(plan.metrics.map(({ name, quantile, adjustFor }) => ({ name, quantile, adjustFor }))).toEqual([
    { name: "Booked", quantile: null, adjustFor: null },
    { name: "Fare per visitor", quantile: null, adjustFor: { kind: "days-before", days: 14 } },
    { name: "Bookings per search", quantile: null, adjustFor: null },
    { name: "Page time, 95th percentile", quantile: "0.95", adjustFor: null },
    { name: "Support contacts", quantile: null, adjustFor: null },
  ]);
  expect(plan.forecast).toEqual({ unitsPerMonth: 30000 });
  expect(plan.subgroups).toEqual(["country", "platform"]);
});
