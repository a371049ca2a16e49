import { describe, expect, it } from "vitest";
import { planOf, planText } from "./plans.ts";

describe("a where", () => {
  const testsOf = (where: string) => {
    const plan = planOf(planText({ filters: `filters: [{name: f, drop: rows, where: ${where}}]` }));
    const [filter] = plan.filters;
    return filter !== undefined && "where" in filter ? filter.where : [];
  };
  const valuesOf = (value: string) =>
    testsOf(`{x: [${value}]}`).flatMap((test) => (test.kind === "in" ? test.values : []));

  it.each([
    ["1", { kind: "number", value: "1" }],
    ['"1"', { kind: "text", text: "1" }],
    ["'01'", { kind: "text", text: "01" }],
    ["0123", { kind: "number", value: "123" }],
    ["1e3", { kind: "number", value: "1000" }],
    ["-1.50", { kind: "number", value: "-1.5" }],
    ["12345678901234567890", { kind: "number", value: "12345678901234567890" }],
    ["0.10000000000000000001", { kind: "number", value: "0.10000000000000000001" }],
    ["true", { kind: "boolean", value: true }],
    ["False", { kind: "boolean", value: false }],
    ["'true'", { kind: "text", text: "true" }],
    ["yes", { kind: "text", text: "yes" }],
    ["NO", { kind: "text", text: "NO" }],
    ["2026-03-02", { kind: "text", text: "2026-03-02" }],
    ["1_000", { kind: "text", text: "1_000" }],
    ["5%", { kind: "text", text: "5%" }],
    ["''", { kind: "text", text: "" }],
    ["'null'", { kind: "text", text: "null" }],
  ])("reads %s as YAML 1.2 does, with all digits", (written, value) => expect(valuesOf(written)).toEqual([value]));

  it("takes a value, a list, or tests of which all must hold", () => {
    const text = (value: string) => ({ kind: "text", text: value });
    expect(testsOf("{a: x, b: [x, 2], c: {not: x}, d: {not: [x, y]}, e: {in: x}, f: {in: [x]}}")).toEqual([
      { column: "a", kind: "in", values: [text("x")] },
      { column: "b", kind: "in", values: [text("x"), { kind: "number", value: "2" }] },
      { column: "c", kind: "not", values: [text("x")] },
      { column: "d", kind: "not", values: [text("x"), text("y")] },
      { column: "e", kind: "in", values: [text("x")] },
      { column: "f", kind: "in", values: [text("x")] },
    ]);
    expect(
      testsOf("{a: {not: 3, above: 1, below: 1e2, at-least: -0.50, at-most: 7, missing: false, matches: [b*, '?']}}"),
    ).toEqual([
      { column: "a", kind: "not", values: [{ kind: "number", value: "3" }] },
      { column: "a", kind: "above", value: "1" },
      { column: "a", kind: "below", value: "100" },
      { column: "a", kind: "at-least", value: "-0.5" },
      { column: "a", kind: "at-most", value: "7" },
      { column: "a", kind: "missing", value: false },
      { column: "a", kind: "matches", patterns: ["b*", "?"] },
    ]);
    expect(testsOf("{a: {missing: true}, b: {matches: robot*}}")).toEqual([
      { column: "a", kind: "missing", value: true },
      { column: "b", kind: "matches", patterns: ["robot*"] },
    ]);
  });
});

it("of a filter of units is asked at enrolment, unless the plan says ever", () => {
  const where = "drop: units, where: {staff: true}";
  const filters = `filters: [{name: a, ${where}}, {name: b, ${where}, when: at-enrolment}, {name: c, ${where}, when: ever}]`;
  const whens = planOf(planText({ filters })).filters.map((filter) => ("when" in filter ? filter.when : null));
  expect(whens).toEqual(["at-enrolment", "at-enrolment", "ever"]);
});

describe("a share", () => {
  const planWith = (sections: Readonly<Record<string, string>>) => planOf(planText(sections));

  it.each([
    ["0.05", 0.05],
    ["5%", 0.05],
    ["5 %", 0.05],
    ["0.1%", 0.001],
    ["'7%'", 0.07],
    ["1", 1],
    ["250%", 2.5],
  ])("of an effect may be written %s", (written, value) => {
    const metrics = `metrics: [{name: B, role: primary, summary: proportion, of: {event: b}, worthwhile: {relative: ${written}}}]`;
    expect(planWith({ metrics }).metrics[0]?.worthwhile).toEqual({ kind: "relative", value });
  });

  it("may be an absolute amount: in the metric's unit, or of the units", () => {
    const metrics = `metrics:
  - {name: B, role: primary, summary: proportion, of: {event: b}, worthwhile: {absolute: 0.2%}, expected: {absolute: 0.004}}
  - {name: C, role: guardrail, summary: mean, of: {event: c}, margin: {absolute: 12.5}}`;
    const [b, c] = planWith({ metrics }).metrics;
    expect([b?.worthwhile, b?.expected, c?.margin]).toEqual([
      { kind: "absolute", value: 0.002 },
      { kind: "absolute", value: 0.004 },
      { kind: "absolute", value: 12.5 },
    ]);
  });

  it("keeps its digits where a rank hangs on them", () => {
    const capOf = (cap: string) =>
      planWith({ metrics: `metrics: [{name: B, role: primary, summary: mean, of: {sum: x}, cap: ${cap}}]` }).metrics[0]
        ?.cap;
    expect(capOf("{quantile: 0.90000000000000000001}")).toEqual({ kind: "quantile", q: "0.90000000000000000001" });
    expect(capOf("{quantile: 99.9%}")).toEqual({ kind: "quantile", q: "0.999" });
    expect(capOf("{quantile: .5}")).toEqual({ kind: "quantile", q: "0.5" });
    expect(capOf("{at: 5e2}")).toEqual({ kind: "at", at: "500" });
    expect(capOf("{at: 123456789012345678.123456789}")).toEqual({ kind: "at", at: "123456789012345678.123456789" });
  });

  it("may be the allocation's and the decision's too", () => {
    const plan = planWith({
      variants: "variants: [{name: a, control: true, allocation: 90%}, {name: b, allocation: 10%}]",
      decision: "decision: {confidence: 99%, power: 0.9, adopt-when: shown-better, primaries: all, interval: normal}",
    });
    expect(plan.variants.map(({ allocation }) => allocation)).toEqual([0.9, 0.1]);
    expect(plan.decision).toEqual({
      confidence: 0.99,
      power: 0.9,
      adoptWhen: "shown-better",
      primaries: "all",
      interval: "normal",
    });
  });
});
