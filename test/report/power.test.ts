import { describe, expect, it } from "vitest";
import { renderReport } from "../../src/report/index.ts";
import { methodsSection } from "../../src/report/sections/methods.ts";
import { metricSections } from "../../src/report/sections/metrics.ts";
import { powerSection } from "../../src/report/sections/power.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import { adopt, little, notSettled, several, undecidable } from "./cases.ts";
import { sectionOf, textOf } from "./markup.ts";

const section = ({ plan, reduction, effects }: ReportInputs) => powerSection(plan, reduction, effects);
const withPlan = (inputs: ReportInputs, changes: Partial<ReportInputs["plan"]>): ReportInputs => ({
  ...inputs,
  plan: { ...inputs.plan, ...changes },
});

describe("section 6", () => {
  // R 4.2.2 from the standard errors of the case, k = qnorm(.975) + qnorm(.8), n = 42828:
  //   Booked            pnorm(w / se(N) - z) 0.47621 at n, 0.82736 at 100000; n (k se / w)^2 93087.4; k se 0.00884571, 7.371%
  //   Support contacts  0.24067, 0.48363; 213152.66; 0.00893478, 11.155%     Fare  k se 11.3746, 11.799%
  //   exaggeration at w, by integrate: 1.440029
  it("tells of each measure how often it is found, the size it needs, the smallest effect found and what is overstated", () => {
    const { table } = section(notSettled);
    expect(table?.columns).toEqual([
      "Asked for, or limit",
      "Found with 42,828, as counted",
      "Found with 100,000, as planned",
      "Visitors for 4 of 5",
      "Smallest effect found in 4 of 5",
      "Overstated",
    ]);
    expect(table?.rows.map(({ metric, cells }) => [metric, ...cells])).toEqual([
      ["Booked", "5% more", "48 of 100", "83 of 100", "93,088", "0.885 points (7.4%)", "1.44 times"],
      ["Support contacts", "5% more", "24 of 100", "48 of 100", "213,153", "0.00893 (11.2%)", "\u2013"],
      ["Fare per visitor", "\u2013", "\u2013", "\u2013", "\u2013", "11.4 kr (11.8%)", "\u2013"],
    ]);
  });

  it("tells the size that was planned beside the one counted, and the size of a next test with what it finds", () => {
    const { sizes, next } = section(notSettled);
    expect(sizes).toBe(
      "The plan asked for 100,000 visitors, all variants together; 42,828 visitors were counted, 42.8% of that. It asks for a power of 80%: a test of the right size finds what it was sized for in 4 of 5 cases.",
    );
    // 213152.66 / 2; at 42828 in 13.98 days 69.6 days, 10 weeks; Booked at that size 0.98868; 1 - misses 0.78868
    expect(next[0]).toBe(
      "For the plan\u2019s power a next test needs 213,153 visitors, all variants together: 106,577 in each variant, 10 weeks of enrolment at this test\u2019s pace of 3,060 a day. It finds a gain of 5% in Booked in 98 of 100 cases and, where nothing changes, Support contacts within its limit of 5% more in 4 of 5 cases; all of it together in at least 78 of 100.",
    );
    expect(next[1]).toMatch(/^A size is never to be taken from the effect found here/);
  });

  it("names the measures that are not in its table, and why", () => {
    const without = notSettled.effects.map((effect) =>
      effect.metric === "Fare per visitor" ? { ...effect, power: { ...effect.power, detectable: null } } : effect,
    );
    expect(section({ ...notSettled, effects: without }).reading.at(-1)).toBe(
      "Not in the table: Fare per visitor, for want of a standard error to take a size from.",
    );
    expect(section(notSettled).reading.join(" ")).not.toContain("Not in the table");
  });

  it("leaves out the planned size where none is stated, or as many were counted", () => {
    const columns = (plannedUnits: number | null) => section(withPlan(adopt, { plannedUnits })).table?.columns.join();
    expect(columns(100_000)).toContain("as planned");
    expect(columns(null)).not.toContain("as planned");
    expect(columns(100_301)).not.toContain("as planned");
    expect(section(withPlan(adopt, { plannedUnits: null })).sizes).toMatch(
      /^The plan states no size\. 100,301 visitors/,
    );
  });

  it("says what cannot be sized, and stands without a table where nothing can", () => {
    expect(section(little).next.join(" ")).toContain("For Booked these data tell no size.");
    const bare: ReportInputs = { ...little, effects: little.effects.slice(0, 1) };
    expect(section(bare)).toMatchObject({ table: null, reading: [] });
    expect(section(bare).next[0]).toBe("For Booked these data tell no size.");
    const none = { ...adopt, effects: adopt.effects.filter(({ role }) => role === "secondary") };
    expect(section(none).next[0]).toBe("The plan states no amount that a next test could be sized for.");
  });

  it("is on the page with the variant's column only where there are several, and on an undecidable one as not for deciding", async () => {
    const text = async (inputs: ReportInputs) => textOf(sectionOf((await renderReport(inputs)).html, "power"));
    expect(await text(several)).toContain("Measure Variant Asked for, or limit");
    expect(await text(adopt)).toContain("Measure Asked for, or limit");
    expect(await text(undecidable)).toContain("For finding the fault, not for deciding.");
  });
});

describe("p of several questions", () => {
  const heads = ({ plan, reduction, effects }: ReportInputs) =>
    metricSections(plan, reduction, effects).map(({ adjustedFor }) => adjustedFor);

  it("is headed by what it is adjusted for", () => {
    expect(heads(several)).toEqual([...Array(4).fill("3 variants"), ...Array(2).fill("6 tests for information")]);
    expect(heads(adopt)).toEqual([null, null, null]);
    const any = { ...several.plan.decision, primaries: "any" } as const;
    expect(heads(withPlan(several, { decision: any })).slice(0, 3)).toEqual([
      "the variants and deciding measures",
      "the variants and deciding measures",
      "3 variants",
    ]);
  });

  it("counts no test that has no p", () => {
    const [first, ...rest] = several.effects.filter(({ role }) => role === "secondary");
    if (first === undefined) throw new Error("no measure for information");
    const { difference } = first.contrast;
    const without = {
      ...first,
      adjusted: null,
      contrast: { ...first.contrast, difference: { ...difference, p: null } },
    };
    const effects = several.effects.map((effect) => (effect === first ? without : effect));
    expect(rest).toHaveLength(5);
    expect(heads({ ...several, effects }).at(-1)).toBe("5 tests for information");
  });

  it("has Holm's beside it for several variants, and none for what is for information", () => {
    const { plan, reduction, effects } = several;
    const sections = metricSections(plan, reduction, effects);
    expect(sections[0]?.effects.map(({ pBeside }) => pBeside)).toEqual(["Holm 0.00016", "Holm 0.0015", "Holm 0.411"]);
    expect(sections.at(-1)?.effects.map(({ pBeside }) => pBeside)).toEqual(["", "", ""]);
  });

  it("has its method and sources told, only those that this report uses", () => {
    const told = (inputs: ReportInputs) =>
      methodsSection(inputs)
        .methods.map(({ name, how, source }) => `${name}: ${how} ${source}.`)
        .join("\n");
    expect(told(several)).toMatch(/Several variants: .*Dunnett 1955.*Holm 1979/);
    expect(told(several)).toMatch(/Several deciding measures: Every one of them must pass.*Berger 1982/);
    expect(told(several)).toMatch(/Measures for information: .*over their 6 tests.*Benjamini and Hochberg 1995/);
    expect(told(several)).not.toContain("Dunn 1961");
    expect(told(adopt)).not.toMatch(/Several|Measures for information/);
    expect(told(adopt)).toMatch(/Power and sizes: .*Chow, Shao and Wang 2008.*Gelman and Carlin 2014/);
    const any = { ...several.plan.decision, primaries: "any" } as const;
    expect(told(withPlan(several, { decision: any }))).toMatch(/Any one of the 2 is enough.*Dunn 1961.*Holm 1979/);
  });
});
