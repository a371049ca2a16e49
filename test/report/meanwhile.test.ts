import { describe, expect, it } from "vitest";
import { incidentDays } from "../../src/report/incidents.ts";
import { renderReport } from "../../src/report/index.ts";
import { adopt } from "./cases.ts";
import { sectionOf, textOf } from "./markup.ts";
import { atALook, meanwhile } from "./meanwhile.ts";

const section = async (inputs: typeof adopt, name: string) =>
  textOf(sectionOf((await renderReport(inputs)).html, name)).replace(/[\u201c\u201d]/g, '"');

describe("incidents in the report", () => {
  it("stand at the end of section 3 with when, where, what happened, how many enrolled then, and what depends on it", async () => {
    const text = await section(meanwhile, "trust");
    expect(text).toContain(
      'payment outage From 2026-03-04 08:00, before 2026-03-05; only where "country" is as the plan says. Cards were refused. 41,150 visitors with "list" and 41,150 with "calendar" enrolled during it. The decision depends on it: without them it would be not settled.',
    );
    expect(text).toMatch(
      /strike From 2026-03-04 08:00, before 2026-03-05\. 2,120 visitors .* The decision does not depend on it/,
    );
    expect(await section(adopt, "trust")).not.toContain("What happened meanwhile");
  });

  it("are answered on page one, and are a row each of the other choices, also of report.json", async () => {
    expect(await section(meanwhile, "decision")).toContain(
      'What happened meanwhile: "payment outage" and "strike". The decision depends on "payment outage". More in section 3.',
    );
    expect(await section(meanwhile, "metrics")).toMatch(
      /Without visitors enrolled during "payment outage" .* differs: not settled.*Without visitors enrolled during "strike" .* the same/,
    );
    const { json } = await renderReport(meanwhile);
    expect(json.sensitivity[0]?.rows.map(({ choice, agrees }) => [choice, agrees])).toEqual([
      ["as-planned", true],
      ["without-incident:payment outage", false],
      ["without-incident:strike", true],
    ]);
  });

  it("are marked by the local days that they touch, the last one before their end", () => {
    expect(incidentDays(meanwhile.plan)).toEqual([
      { name: "payment outage", first: { year: 2026, month: 3, day: 4 }, last: { year: 2026, month: 3, day: 4 } },
      { name: "strike", first: { year: 2026, month: 3, day: 7 }, last: { year: 2026, month: 3, day: 9 } },
    ]);
  });
});

describe("planned looks in the report", () => {
  it("are told on page one, in the methods, and instead of the caution against looking at all", async () => {
    const first = await section(atALook, "decision");
    expect(first).toContain("This is look 2 of 4, at 42.8% of the planned 100,000 visitors.");
    expect(first).toContain("Tests stopped early exaggerate");
    expect(first).toContain("The next look is at 75% of the planned 100,000 visitors.");
    expect(first).not.toContain("plan the looks first");
    const methods = await section(atALook, "methods");
    expect(methods).toContain("The plan looks 4 times, at 25%, 50%, 75% and 100% of its size; this is look 2.");
    expect(methods).toContain("The looks at this test were planned beforehand");
    expect(await section(atALook, "metrics")).toContain("p, adjusted for 4 looks");
  });

  it("leave the report of a test with one analysis as it was", async () => {
    const { html } = await renderReport(adopt);
    expect(textOf(html)).not.toMatch(/planned looks|look \d of/i);
  });
});
