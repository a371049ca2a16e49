import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { parse } from "yaml";
import { z } from "zod";
import { planJsonSchema } from "../../src/plan/index.ts";
import { planText } from "./plans.ts";

const schema = planJsonSchema();
/** What an editor does with the JSON Schema: it knows nothing of our zod schema, only of this object. */
const editor = z.fromJSONSchema(JSON.parse(JSON.stringify(schema)));
const accepts = (text: string) => editor.safeParse(parse(text)).success;
const fixture = (name: string) => readFileSync(new URL(`fixtures/${name}`, import.meta.url), "utf8");

const metric = (key: string) => `metrics: [{name: B, role: primary, summary: mean, of: {sum: x}, ${key}}]`;

describe("the plan's JSON Schema", () => {
  it("takes the whole format and the smallest plan", () => {
    expect(accepts(fixture("whole-format.yaml"))).toBe(true);
    expect(accepts(fixture("fare-calendar.yaml"))).toBe(true);
    expect(accepts(planText())).toBe(true);
  });

  it.each([
    { forecast: "forecast: {units-per-month: 30000}" },
    { decision: "decision: {primaries: any, interval: skew-corrected}" },
    { looks: "looks: {planned: [25%, 0.5, 1], at: 2, spending: pocock}" },
    { incidents: "incidents: [{name: a, from: 2026-03-04, before: 2026-03-05T12:00, where: {x: 1}, what: b}]" },
    { metrics: metric("adjust-for: {days-before: 0.5}") },
    { metrics: metric("adjust-for: {column: past_fares}") },
    { metrics: metric("quantile: 95%") }, // which summary has it is beyond an editor
  ])("takes %j", (sections) => expect(accepts(planText(sections))).toBe(true));

  it.each([
    ["an unknown key", { x: "loks: 3" }],
    ["an unknown key inside", { decision: "decision: {threshold: 1}" }],
    ["a wrong word", { decision: "decision: {primaries: some}" }],
    ["a wrong type", { variants: "variants: [{name: 1, control: true}, {name: b}]" }],
    ["a missing key", { question: "" }],
    ["one variant", { variants: "variants: [{name: a, control: true}]" }],
    ["a confidence of 95", { decision: "decision: {confidence: 95}" }],
    ["an empty where", { filters: "filters: [{name: f, drop: rows, where: {}}]" }],
    ["two amounts", { metrics: "metrics: [{name: B, summary: mean, of: {}, margin: {relative: 0.1, absolute: 1}}]" }],
    ["a forecast of no units", { forecast: "forecast: {units-per-month: 0}" }],
    ["a forecast of half a unit", { forecast: "forecast: {units-per-month: 0.5}" }],
    ["looks without which", { looks: "looks: {planned: [0.5, 1]}" }],
    ["a look beyond the planned size", { looks: "looks: {planned: [0.5, 1.5], at: 1}" }],
    ["a single look", { looks: "looks: {planned: [1], at: 1}" }],
    ["an incident without an end", { incidents: "incidents: [{name: a, from: 2026-03-04}]" }],
    ["two covariates in one", { metrics: metric("adjust-for: {days-before: 7, column: past}") }],
    ["no days before", { metrics: metric("adjust-for: {days-before: 0}") }],
    ["a quantile of 95", { metrics: metric("quantile: 95") }],
    ["a word that the interval is not", { decision: "decision: {interval: exact}" }],
    ["an empty text", { owner: "owner: ''" }],
  ])("refuses %s", (_, sections) => expect(accepts(planText(sections))).toBe(false));

  it("asks for what a plan must have and for nothing that has a default", () => {
    expect((schema as { required: string[] }).required.toSorted()).toEqual([
      "experiment",
      "log",
      "metrics",
      "question",
      "variants",
    ]);
  });

  it("explains every key, for editors that show it", () => {
    const unexplained: string[] = [];
    const visit = (node: unknown, path: string): void => {
      if (typeof node !== "object" || node === null) return;
      for (const [key, inside] of Object.entries((node as { properties?: object }).properties ?? {})) {
        if (typeof inside.description !== "string") unexplained.push(`${path}.${key}`);
      }
      for (const [key, inside] of Object.entries(node)) visit(inside, `${path}.${key}`);
    };
    visit(schema, "");
    expect(unexplained).toEqual([]);
    expect(JSON.stringify(schema)).not.toContain('"expected":"');
  });
});
