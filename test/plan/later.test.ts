import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { loadPlan } from "../../src/plan/index.ts";
import { LATER } from "../../src/plan/rules/later.ts";
import { messageOf, planText } from "./plans.ts";

const WHOLE = readFileSync(new URL("fixtures/whole-format.yaml", import.meta.url), "utf8");

/** Everything that is or was on the list, each with the places where it stands. */
const sections = {
  metrics: `metrics:
  - {name: A, role: primary, summary: proportion, of: {event: b}, adjust-for: {days-before: -1}}
  - {name: B, summary: quantile, quantile: 95, of: {event: page, sum: seconds}}
  - {name: C, summary: mean, of: {sum: x}, adjust-for: {column: past}}`,
  decision: "decision: {primaries: any, interval: skew-corrected}",
  forecast: "forecast: {units-per-month: 30000}",
};

describe("what is not built yet", () => {
  it("is refused wherever it stands, each line of the list by itself, with what else is wrong there", () => {
    const told = LATER.map((feature) => {
      const loaded = loadPlan(planText(sections), { later: [feature] });
      const problems = "problems" in loaded ? loaded.problems : [];
      expect(problems.map(({ message }) => message)).toContain(
        "Expected a number between 0 and 1. For 95% write 0.95.",
      );
      return problems.filter(({ message }) => message.includes("not built yet"));
    });
    expect(told.every((problems) => problems.length > 0)).toBe(true);
    expect(told.flat().every(({ message }) => / is not built yet\. [A-Z]/.test(message))).toBe(true);
  });

  it("is told with its place: a key by the key, a word by the word", () => {
    const later = [
      { of: "metric", path: ["summary"], value: "proportion", remedy: "Take mean." },
      { of: "metric", path: ["cap"], remedy: "Remove it." },
      { of: "plan", path: ["decision", "primaries"], value: "all", remedy: "Remove it." },
      { of: "plan", path: ["planned"], remedy: "Remove it." },
    ] as const;
    const metrics = `metrics:
  - {name: A, role: primary, summary: mean, of: {sum: x}, cap: {at: 5}}
  - {name: B, summary: proportion, of: {event: b}}`;
    const decision = "decision: {primaries: any}"; // not the word that is refused
    expect(
      messageOf(loadPlan(planText({ metrics, decision, planned: "planned: {units: 5}" }), { later })),
    ).toBe(`plan.yaml has 3 mistakes. Nothing was computed and no file was written.

plan.yaml:10:59  metrics, A
    - {name: A, role: primary, summary: mean, of: {sum: x}, cap: {at: 5}}
                                                            ^^^
    cap is not built yet. Remove it.

plan.yaml:11:24  metrics, B
    - {name: B, summary: proportion, of: {event: b}}
                         ^^^^^^^^^^
    summary: proportion is not built yet. Take mean.

plan.yaml:13:1
    planned: {units: 5}
    ^^^^^^^
    planned is not built yet. Remove it.`);
  });

  it("is all that keeps the whole format from being a plan", () => {
    const problemsOf = (options: Parameters<typeof loadPlan>[1]) => {
      const loaded = loadPlan(WHOLE, options);
      return "problems" in loaded ? loaded.problems.map(({ message }) => message) : [];
    };
    expect(problemsOf(undefined)).toEqual(problemsOf({ later: LATER }));
    expect(problemsOf(undefined).every((message) => message.includes(" is not built yet. "))).toBe(true);
    expect(problemsOf({ later: [] })).toEqual([]);
  });
});
