import { describe, expect, it } from "vitest";
import { accrual as accrualChart } from "../../src/report/charts/accrual.ts";
import { draw } from "../../src/report/charts/draw.ts";
import { reportJson } from "../../src/report/index.ts";
import { page } from "../../src/report/page.ts";
import { accrualParts } from "../../src/report/sections/accrual.ts";
import { isoDay, weekdaysSentence } from "../../src/report/sections/weekdays.ts";
import { adopt, several } from "./cases.ts";
import { accrualOf, grouped } from "./groups.ts";

const metricOf = async (name: string) => (await page(grouped)).metrics.find((metric) => metric.name === name);

describe("which weekdays were covered", () => {
  const of = (days: readonly number[]) =>
    weekdaysSentence(adopt.plan, {
      ...adopt.reduction,
      facts: { ...adopt.reduction.facts, analysedByDay: days.map((day) => ({ day, units: [1, 1] })) },
    });
  // 2 March 2026 was a Monday, day 20514 since 1970-01-01 (a Thursday): date -ud @1772409600 +%A.
  const from = (count: number, first = 20_514) => Array.from({ length: count }, (_, i) => first + i);

  it("is said in one sentence, also where each was covered alike", () => {
    expect(of(from(14))).toBe("Visitors counted were enrolled on 14 days, 2 to 15 March 2026: each weekday twice.");
    expect(of(from(7))).toBe("Visitors counted were enrolled on 7 days, 2 to 8 March 2026: each weekday once.");
  });
  it("names those that were covered more or less often than others, and not at all", () => {
    expect(of(from(9))).toBe(
      "Visitors counted were enrolled on 9 days, 2 to 10 March 2026: Monday and Tuesday twice and Wednesday, Thursday, Friday, Saturday and Sunday once.",
    );
    expect(of(from(1, 20_513))).toBe(
      "Visitors counted were enrolled on 1 day, 1 March 2026: Sunday once and Monday, Tuesday, Wednesday, Thursday, Friday and Saturday never.",
    );
  });
  it("is not said of nobody, and holds before 1970 too", () => {
    expect(of([])).toBe("No visitor was counted.");
    expect(isoDay(-1)).toBe("1969-12-31");
    expect(of([-1])).toContain("31 December 1969: Wednesday once"); // cal 12 1969
  });
});

describe("the effect as units enrolled", () => {
  it("explains the band where it stands, and says from when on it lies on one side", async () => {
    const part = (await metricOf("Booked"))?.accrual[0];
    const said = part?.sentences.join(" ") ?? "";
    expect(said).toContain(
      "The band holds the truth on all days at once with 95% confidence, so it may be read on any day and as often as one likes; the interval of one day may not. It is narrowest at 100,000 visitors, as many as were planned.",
    );
    // estimates less twice 0.01 / sqrt(day): 0, 0.0019, ...: from the second day on above 0
    expect(said).toContain("From 3 March 2026 to the end the whole band lies above zero.");
    expect(said).toContain("Monday twice, Tuesday, Wednesday, Thursday and Friday once and Saturday and Sunday never.");
    expect(part?.rows).toHaveLength(6);
    expect(part?.rows[0]).toEqual({ day: "2 March 2026", cells: ["16,000", "0.02", "0.01", "0.03", "0", "0.04"] });
  });
  // "No difference lies within the band on every day" could be read as "there is no difference that does"
  it("says where zero lies to the band, in words that can be read one way only", async () => {
    const said = async (estimates: readonly number[]) => {
      const parts = await accrualParts(
        grouped.plan,
        grouped.effects,
        [accrualOf("Booked", estimates)],
        grouped.reduction,
      );
      return parts.get("Booked")?.[0]?.sentences.at(-1);
    };
    // the band is 0.02 / sqrt(day) on either side
    expect(await said([0.001, 0.001])).toBe("Zero lies within the band on every day shown.");
    expect(await said([0.03, 0.001])).toBe(
      "On some days the whole band lay on one side of zero; at the end zero lies within it.",
    );
    expect(await said([0.001, 0.03])).toBe("On the last day the whole band lies above zero.");
    expect(await said([0.001, -0.03, -0.03])).toBe("From 3 March 2026 to the end the whole band lies below zero.");
  });
  // with several variants or looks the interval that decides is another one, and the two stand on one page
  it("says that the interval at the end is of that day alone, and whose planned size the band is narrowest at", async () => {
    const accruals = [{ ...accrualOf("Booked", [0.01]), variant: "calendar" }];
    const said = async (plan: typeof adopt.plan, effects: typeof adopt.effects) =>
      (await accrualParts(plan, effects, accruals, grouped.reduction)).get("Booked")?.[0]?.sentences.join(" ");
    expect(await said(grouped.plan, grouped.effects)).toContain("At the end the interval of that day alone is ");
    expect(await said(grouped.plan, grouped.effects)).toContain("as many as were planned. ");
    expect(await said(several.plan, several.effects)).toContain("as many as were planned in these two groups. ");
  });
  it("is drawn for what decides, and stands in a table for what is for information", async () => {
    expect((await metricOf("Booked"))?.accrual[0]?.drawing).not.toBeNull();
    const fare = (await metricOf("Fare per visitor"))?.accrual[0];
    expect(fare?.drawing).toBeNull();
    expect(fare?.rows).toHaveLength(3);
  });
  it("says why it is not shown, where on no day there was enough", async () => {
    const part = (await metricOf("Support contacts"))?.accrual[0];
    expect(part?.sentences.join(" ")).toContain("on no day did each group have 200 visitors");
    expect(part?.rows).toEqual([]);
  });
  it("keeps the band within the drawing where it is far wider than at the end", async () => {
    const point = { units: 400, estimate: 0, low: -1, high: 1, bandLow: -1e6, bandHigh: 1e6 };
    const last = { units: 800, estimate: 0, low: -1, high: 1, bandLow: -2, bandHigh: 2 };
    const spec = accrualChart([point, last], { xTitle: "x", xLabel: String, yLabel: String });
    const { svg } = await draw(spec, "wide", null);
    const places = [...svg.matchAll(/[ML](-?[\d.]+),(-?[\d.]+)/g)].map(([, x, y]) => [Number(x), Number(y)] as const);
    expect(places.length).toBeGreaterThan(4);
    expect(places.every(([x, y]) => x >= -10 && x <= 340 && y >= -10 && y <= 240)).toBe(true);
  });
});

describe("the effect by day since enrolment", () => {
  it("says how the difference changes over the days, and of whom", async () => {
    const said = (await metricOf("Booked"))?.days[0]?.sentences.join(" ") ?? "";
    expect(said).toContain("Counted are the 98,900 visitors that were followed to the end");
    expect(said).toContain(
      "Over the days the difference shrinks or turns by more than chance explains (0.35 percentage points lower from one day to the next, 95% interval 0.53 to 0.17 percentage points lower, p = 0.0001).",
    );
  });
});

describe("what of time cannot be told", () => {
  it("is said: without times neither, without a follow-up of two days not by day since enrolment", async () => {
    const untold = async (plan: typeof adopt.plan) => (await page({ ...adopt, plan })).untold;
    const columns = { unit: "visitor", time: null, event: null, variant: "arm", eventId: null };
    expect(await untold({ ...adopt.plan, log: [{ files: ["a.csv"], columns }] })).toEqual([
      "The log has no times: how the differences came about as visitors enrolled, and by day since enrolment, is not told.",
    ]);
    const without = "Differences by day since enrolment are not told: the plan has no follow-up of two days or more.";
    expect(await untold({ ...adopt.plan, followUp: null })).toEqual([without]);
    expect(await untold({ ...adopt.plan, followUp: { days: 1.5, incomplete: "keep" } })).toEqual([without]);
    expect(await untold(adopt.plan)).toEqual([]);
  });
});

describe("the effect by subgroup", () => {
  it("has a sentence for every level, and tells a value named other from the rest and from none", async () => {
    const part = (await metricOf("Booked"))?.subgroups[0];
    expect(part?.figure?.rows.map(({ level, stands }) => [level, stands])).toEqual([
      ["NO", "Does not point against the whole."],
      ["other", "Points against the whole."],
      ["IS", 'Too few to tell: 34 visitors with "calendar", 31 with "list".'],
      ["The 4 other values", "Does not point against the whole."],
      ["No value", 'Too few to tell: 4 visitors with "calendar", 1 with "list".'],
    ]);
    expect(part?.sentences[0]).toBe(
      'The levels of "country" differ from each other by more than chance explains (Cochran\u2019s Q 21.4 on 2 degrees of freedom, p < 0.0001).',
    );
  });
  it("shows a value of the log as it is, in the numbers too, and begins our own words with a capital", async () => {
    for (const name of ["Booked", "Fare per visitor"]) {
      const part = (await metricOf(name))?.subgroups[0];
      const levels = part?.numbers.map(({ level }) => level);
      expect(levels).toEqual(["NO", "other", "IS", "The 4 other values", "No value"]);
    }
  });
  it("keeps levels apart in report.json by their kind", () => {
    const [first] = reportJson(grouped).subgroups;
    expect(first?.levels.map(({ level, kind }) => [kind, level])).toEqual([
      ["value", "NO"],
      ["value", "other"],
      ["value", "IS"],
      ["rest", null],
      ["missing", null],
    ]);
    expect(first?.levels[4]?.sentence).toBe(
      'no value: too few to tell, since one of the groups has fewer than two visitors with a value (4 visitors with "calendar", 1 with "list").',
    );
    expect(first?.levels[4]?.difference.estimate).toBeNull();
  });
  it("stands in a table alone for what is for information", async () => {
    const part = (await metricOf("Fare per visitor"))?.subgroups[0];
    expect(part?.figure).toBeNull();
    expect(part?.numbers).toHaveLength(5);
    expect(part?.sentences[0]).toContain("fewer than two of them are large enough");
  });
});

describe("what was asked afterwards of several variants", () => {
  // the measure was told once for each variant, and p as "p = 0.02" under the head "p"
  it("tells the measure once, and each variant in a sentence and a row", async () => {
    const metrics = { plan: several.plan, reduction: several.reduction, effects: several.effects };
    const asked = (await page({ ...several, afterwards: { subgroups: [], metrics } })).afterwards;
    const measures = several.plan.metrics.map(({ name }) => name);
    expect(asked?.metrics.map(({ name }) => name)).toEqual(measures);
    const variants = several.plan.variants.filter(({ isControl }) => !isControl).map(({ name }) => name);
    for (const { sentences } of asked?.metrics ?? []) expect(sentences).toHaveLength(variants.length);
    expect(asked?.rows.map(({ name }) => name)).toEqual(
      several.effects.map(({ metric, variant }) => `${metric} with "${variant}"`),
    );
    for (const { p } of asked?.rows ?? []) expect(p).toMatch(/^(<\u00a0?\s?0\.0001|[01](\.\d+)?|\u2013)$/);
  });
});

describe("what was asked afterwards", () => {
  it("has a section of its own that says so, and is nowhere else", async () => {
    const whole = await page(grouped);
    expect(whole.afterwards?.sentences[0]).toContain("None of this was planned before the test began.");
    expect(whole.afterwards?.metrics.map(({ name }) => name)).toEqual(["Fare per visitor"]);
    expect(whole.afterwards?.subgroups.map(({ title }) => title)).toEqual(['Booked, by "platform" at enrolment']);
    expect(whole.metrics.flatMap(({ subgroups }) => subgroups.map(({ title }) => title)).join()).not.toContain(
      "platform",
    );
    expect((await page(adopt)).afterwards).toBeNull();
    expect(reportJson(adopt).askedAfterwards).toBeNull();
  });
});
