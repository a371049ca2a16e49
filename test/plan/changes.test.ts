import { describe, expect, it } from "vitest";
import { combinedPlan, loadPlan, planChanges, planSteps } from "../../src/plan/index.ts";
import { planOf, planText } from "./plans.ts";

const METRICS = `metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}
    worthwhile: {relative: 5%}
  - name: Fare
    summary: mean
    of: {event: booking, sum: fare}
    cap: {quantile: 0.999}`;
const FILTERS = `filters:
  - {name: probe, drop: rows, where: {visitor: probe}}
  - {name: staff, why: they train, drop: units, where: {is_staff: true}}`;
const plan = planText({ metrics: METRICS, filters: FILTERS });
const changed = (from: string, to: string) => planChanges(plan, plan.replace(from, to));

describe("what differs between two plans", () => {
  it("is nothing for other comments, spaces, quotes and another order of keys", () => {
    expect(planChanges(plan, `# a comment\n${plan.replace("question:", "question:   ")}`)).toEqual([]);
    expect(changed("{name: probe, drop: rows,", "{drop: rows, name: probe,")).toEqual([]);
    expect(changed("name: Booked", 'name: "Booked"')).toEqual([]);
  });

  it("is told by key, in the plan's own words", () => {
    expect(changed("{relative: 5%}", "{relative: 3%}")).toEqual([
      {
        place: "metrics, Booked: worthwhile",
        section: "metrics",
        item: "Booked",
        kind: "changed",
        before: "{relative: 5%}",
        after: "{relative: 3%}",
        decides: true,
        counts: true,
      },
    ]);
  });

  it("is a whole item where one was added or removed, also the first and the last of them", () => {
    const without = planText({ metrics: METRICS });
    expect(planChanges(without, plan).map(({ place, kind, after }) => [place, kind, after])).toEqual([
      ["filters, probe", "added", "{drop: rows, where: {visitor: probe}}"],
      ["filters, staff", "added", "{why: they train, drop: units, where: {is_staff: true}}"],
    ]);
    expect(planChanges(plan, without).map(({ place, kind, after }) => [place, kind, after])).toEqual([
      ["filters, probe", "removed", null],
      ["filters, staff", "removed", null],
    ]);
  });

  it("is a change of order where named items only change places", () => {
    const [probe = "", staff = ""] = FILTERS.split("\n").slice(1);
    expect(planChanges(plan, plan.replace(`${probe}\n${staff}`, `${staff}\n${probe}`))).toMatchObject([
      { place: "filters: their order", kind: "moved", before: "probe, staff", after: "staff, probe", counts: true },
    ]);
  });

  it.each([
    ["a cap for information", "0.999", "0.99", { decides: false, counts: true }],
    ["a filter", "is_staff: true", "is_staff: yes", { decides: false, counts: true }],
    ["why a filter is there", "they train", "they practise", { decides: false, counts: false }],
    ["the question", "raise bookings?", "raise fares?", { decides: false, counts: false }],
    [
      "what a deciding metric counts",
      "of: {event: booking}\n    worth",
      "of: {event: sale}\n    worth",
      { decides: true, counts: true },
    ],
  ])("says of %s whether it decides and whether a figure hangs on it", (_, from, to, expected) => {
    expect(changed(from, to)).toMatchObject([expected]);
  });

  it("knows the same value in another spelling: it is shown, and decides nothing", () => {
    expect(changed("{relative: 5%}", "{relative: 0.05}")).toMatchObject([{ decides: false }]);
  });

  it.each([
    ["decision: {confidence: 90%}", "decision"],
    ["follow-up: {days: 7}", "follow-up"],
    ["enrolment: {from: 2026-03-02}", "enrolment"],
  ])("counts %s, added, to the rule", (line, section) => {
    expect(planChanges(plan, `${plan}${line}\n`)).toMatchObject([{ section, decides: true }]);
  });
});

describe("a plan between two", () => {
  const later = plan
    .replace("0.999", "0.99")
    .replace("{relative: 5%}", "{relative: 3%}")
    .replace(/ {2}- \{name: probe.*\n/, "")
    .replace("they train", "they practise");
  const steps = planSteps(planChanges(plan, later));

  it("has a step for each item, and none for texts", () => {
    expect(steps.map(({ label }) => label)).toEqual([
      "metrics, Booked: worthwhile",
      "metrics, Fare: cap",
      "filters, probe: removed",
    ]);
  });

  it("is the later plan with all steps, and the earlier one with none, texts aside", () => {
    const loaded = (text: string) => {
      const found = loadPlan(text);
      if ("problems" in found) throw new Error(JSON.stringify(found.problems));
      return found.plan;
    };
    expect(loaded(combinedPlan(plan, later, steps, steps))).toEqual(planOf(later));
    expect(loaded(combinedPlan(plan, later, steps, []))).toEqual(planOf(plan.replace("they train", "they practise")));
  });

  it("takes one step alone", () => {
    const [, cap] = steps;
    const alone = combinedPlan(plan, later, steps, cap === undefined ? [] : [cap]);
    expect(planOf(alone).metrics.map(({ worthwhile, cap: own }) => [worthwhile, own])).toEqual([
      [{ kind: "relative", value: 0.05 }, null],
      [null, { kind: "quantile", q: "0.99" }],
    ]);
    expect(planOf(alone).filters.map(({ name }) => name)).toEqual(["probe", "staff"]);
  });

  it("takes what is beyond eight steps together", () => {
    const many = (cap: string) =>
      planText({
        metrics: `${METRICS}\n${Array.from({ length: 10 }, (_, i) => `  - {name: M${i}, summary: mean, of: {sum: fare}, cap: {at: ${cap}}}`).join("\n")}`,
      });
    const all = planSteps(planChanges(many("5"), many("6")));
    expect(all.map(({ label }) => label).slice(-2)).toEqual(["metrics, M6: cap", "3 others together"]);
    expect(planOf(combinedPlan(many("5"), many("6"), all, all))).toEqual(planOf(many("6")));
  });
});
