import { describe, expect, it } from "vitest";
import { sealDifference, sealOf } from "../../src/plan/index.ts";
import { SEAL } from "../../src/plan/seal.ts";
import { planOf, planText } from "./plans.ts";

const METRICS = `metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}
    worthwhile: {relative: 5%}
  - name: Fare
    summary: mean
    of: {event: booking, sum: fare}`;
const plan = planText({ metrics: METRICS });
const seal = (text: string) => sealOf(planOf(text)).fingerprint;
const own = seal(plan);

describe("the fingerprint of a rule", () => {
  it("has the form that a plan may quote", () => {
    expect(own).toMatch(SEAL);
  });

  it.each([
    ["a filter", `${plan}filters: [{name: f, drop: rows, where: {a: 1}}]\n`],
    ["a text", plan.replace("Does it raise bookings?", "Does it?")],
    ["what a variant is", plan.replace("{name: calendar}", "{name: calendar, what: a month}")],
    ["a metric for information", plan.replace("sum: fare}", "sum: fare}\n    cap: {at: 5}")],
    [
      "the effect hoped for",
      plan.replace("worthwhile: {relative: 5%}", "worthwhile: {relative: 5%}\n    expected: {relative: 8%}"),
    ],
    ["another spelling of a value", plan.replace("5%", "0.05")],
    ["a default that is written out", `${plan}decision: {confidence: 95%, adopt-when: shown-better}\n`],
    [
      "shares written otherwise",
      plan
        .replace("{name: list, control: true}", "{name: list, control: true, allocation: 2}")
        .replace("{name: calendar}", "{name: calendar, allocation: 2}"),
    ],
    ["the fingerprint itself", `${plan}registered: {on: 2026-02-27, fingerprint: ${own}}\n`],
  ])("does not change with %s", (_, other) => expect(seal(other)).toBe(own));

  it.each([
    ["the worthwhile effect", plan.replace("5%", "3%"), "metrics"],
    ["what is counted", plan.replace("of: {event: booking}\n", "of: {event: sale}\n"), "metrics"],
    ["another deciding metric", plan.replace("- name: Fare\n", "- name: Fare\n    role: primary\n"), "metrics"],
    [
      "a limit",
      plan.replace("- name: Fare\n", "- name: Fare\n    role: guardrail\n    margin: {relative: 5%}\n"),
      "metrics",
    ],
    ["the shares", plan.replace("{name: calendar}", "{name: calendar, allocation: 2}"), "allocation"],
    [
      "which variant is the control",
      plan
        .replace("{name: list, control: true}", "{name: list}")
        .replace("{name: calendar}", "{name: calendar, control: true}"),
      "allocation",
    ],
    ["who is enrolled", `${plan}enrolment: {before: 2026-03-16}\n`, "enrolment"],
    ["how long units are followed", `${plan}follow-up: {days: 7}\n`, "follow-up"],
    ["the confidence", `${plan}decision: {confidence: 90%}\n`, "decision"],
  ])("changes with %s, and says where", (_, other, part) => {
    expect(sealDifference(own, seal(other))).toEqual([part]);
  });
});
