import { describe, expect, it } from "vitest";
import { allocation } from "../../src/checks/allocation.ts";
import { type LogShape, planOf, reductionOf, rowFilter, unitFilter, variantsOf } from "./make.ts";

function check(shape: LogShape, plan = planOf()) {
  const found = allocation(plan, reductionOf(plan, shape));
  if (found === null) throw new Error("the check was left out");
  return found;
}

describe("allocation", () => {
  // R 4.2.2: chisq.test(c(5000, n))$p.value for n = 5260, 5261, 5334, 5335 prints
  // 0.01026284356, 0.009977963237, 0.001017721125, 0.0009833097501.
  it.each([
    [5260, "pass", 0.01026284356],
    [5261, "caution", 0.009977963237],
    [5334, "caution", 0.001017721125],
    [5335, "fail", 0.0009833097501],
  ])("of 5,000 against %d, planned half and half, is a %s", (other, result, p) => {
    const found = check({ enrolled: [5000, other] });
    expect(found.result).toBe(result);
    expect(found.strong).toBe(false);
    expect(found.figures.p).toBeCloseTo(p, 10);
    expect(found.figures.counts).toEqual({ list: 5000, calendar: other });
    expect(found.figures.df).toBe(1);
  });

  it("holds the groups against the planned shares, not against equal ones", () => {
    const plan = planOf({ variants: variantsOf({ list: 3, calendar: 1 }) });
    expect(check({ enrolled: [7500, 2500] }, plan).figures).toMatchObject({ chiSquare: 0, p: 1 });
    // R 4.2.2: chisq.test(c(5000, 5000), p = c(.75, .25)) prints X-squared = 3333.3, df = 1
    expect(check({ enrolled: [5000, 5000] }, plan).figures.chiSquare).toBeCloseTo(10000 / 3, 6);
    expect(check({ enrolled: [5000, 5000] }, plan).sentence).toContain(
      'The plan gives 75.0% to "list", 25.0% to "calendar".',
    );
  });

  it("names the variant that the log writes otherwise, and sends nobody to look for lost units", () => {
    const plan = planOf({ variants: variantsOf({ list: 1, Calendar: 1 }) });
    const variants = [
      { value: "list", rows: 500 },
      { value: "calendar", rows: 500 },
    ];
    const found = check({ enrolled: [500, 0], facts: { missingVariants: ["Calendar"], variants } }, plan);
    expect(found.result).toBe("fail");
    expect(found.sentence).toMatch(
      /No row of the log has the variant "Calendar"\. The nearest that does occur is "calendar"\.$/,
    );
    expect(found.remedy).toBe(
      "If the log writes it otherwise, correct the name in the plan; if such rows should exist, find out why the log lacks them.",
    );
  });

  it("has a degree of freedom less than variants", () => {
    const plan = planOf({ variants: variantsOf({ list: 1, calendar: 1, map: 1 }) });
    const found = check({ enrolled: [5000, 5000, 5335] }, plan);
    // R 4.2.2: chisq.test(c(5000, 5000, 5335)) prints X-squared = 14.636, df = 2, p-value = 0.0006634
    expect(found.figures.chiSquare).toBeCloseTo(14.636, 3);
    expect(found.figures.df).toBe(2);
    expect(found.sentence).toContain("The 3 groups should be of one size.");
  });

  it("asks the analysed again, and the worse counts", () => {
    const plan = planOf({ filters: [unitFilter("robots")] });
    const found = check({ enrolled: [5335, 5335], ended: { "filter:robots": [335, 0] } }, plan);
    expect(found.result).toBe("fail");
    expect(found.figures).toMatchObject({
      chiSquare: 0,
      p: 1,
      counts: { list: 5335, calendar: 5335 },
      analysed: { df: 1, counts: { list: 5000, calendar: 5335 } },
    });
    expect(found.parts.map((part) => [part.about, part.result])).toEqual([
      ["enrolled", "pass"],
      ["analysed", "fail"],
    ]);
    expect(found.sentence).toBe(found.parts[1]?.sentence);
  });

  it("fails on those enrolled though the analysed are even", () => {
    const plan = planOf({ filters: [unitFilter("robots")] });
    const found = check({ enrolled: [5000, 5335], ended: { "filter:robots": [0, 335] } }, plan);
    expect(found.parts.map((part) => part.result)).toEqual(["fail", "pass"]);
    expect(found.result).toBe("fail");
    expect(found.remedy).toContain("before their first row");
  });

  it("finds the filter that broke the split, and what to do about one that looks past enrolment", () => {
    const plan = planOf({
      filters: [unitFilter("staff"), unitFilter("robots", "ever")],
      followUp: { days: 7, incomplete: "exclude" },
    });
    const ended = { "filter:staff": [10, 12], "filter:robots": [61, 2312], "follow-up": [40, 45] };
    const found = check({ enrolled: [50_148, 50_214], ended }, plan);
    expect(found.result).toBe("fail");
    expect(found.sentence).toContain(
      'Where it broke: before the filter "robots" the groups were 50,138 visitors with "list" and 50,202 with "calendar"; that removed 61 and 2,312.',
    );
    expect(found.sentence).toContain("looks past enrolment, so the variant can change who is removed");
    expect(found.remedy).toContain("when: at-enrolment");
    expect(found.parts[1]?.figures.brokenAt).toBe("filter:robots");
  });

  // R 4.2.2: chisq.test(c(5335, 5020))$p.value 0.001965, c(5335, 5000) 0.0009833: the second filter alone makes it fail
  it("blames the filter that moved the split most, not the one that tipped it", () => {
    const plan = planOf({ filters: [unitFilter("robots"), unitFilter("staff")] });
    const found = check(
      { enrolled: [5335, 5335], ended: { "filter:robots": [0, 315], "filter:staff": [0, 20] } },
      plan,
    );
    expect(found.parts[1]?.result).toBe("fail");
    expect(found.parts[1]?.figures.brokenAt).toBe("filter:robots");
  });

  it("shows the groups after each step of the flow where the split is uneven", () => {
    const plan = planOf({ filters: [rowFilter("old site"), unitFilter("robots")] });
    const soundness = {
      beforeLines: ["rejected", "duplicate", "filter:old site"].map((line) => ({ line, byVariant: [5335, 5340] })),
    };
    const found = check({ enrolled: [5335, 5335], ended: { "filter:robots": [0, 335] }, soundness }, plan);
    expect(found.figures.steps).toMatchObject([
      { after: "rejected", counts: { list: 5335, calendar: 5340 } },
      { after: "duplicate", counts: { list: 5335, calendar: 5340 } },
      { after: "filter:old site", counts: { list: 5335, calendar: 5335 }, p: 1 },
      { after: "filter:robots", counts: { list: 5335, calendar: 5000 } },
    ]);
  });

  it.each([
    ["switched", "in-two-variants: first", planOf({ enrolment: { ...planOf().enrolment, inTwoVariants: "exclude" } })],
    ["follow-up", "not followed to the end", planOf({ followUp: { days: 7, incomplete: "exclude" } })],
    ["filter:robots", 'Find out why the filter "robots"', planOf({ filters: [unitFilter("robots")] })],
  ] as const)("says what to do when the line %s broke the split", (line, remedy, plan) => {
    const found = check({ enrolled: [5335, 5335], ended: { [line]: [335, 0] } }, plan);
    expect(found.remedy).toContain(remedy);
    expect(found.parts[1]?.figures.brokenAt).toBe(line);
  });

  it("blames no line for groups that were uneven from the start", () => {
    const plan = planOf({ filters: [unitFilter("robots")] });
    const found = check({ enrolled: [5000, 5335], ended: { "filter:robots": [1, 1] } }, plan);
    expect(found.parts[1]?.result).toBe("fail");
    expect(found.parts[1]?.sentence).not.toContain("Where it broke");
    expect(found.parts[1]?.figures).not.toHaveProperty("brokenAt");
  });

  it("fails when one variant only has units", () => {
    expect(check({ enrolled: [500, 0] }).result).toBe("fail");
  });

  it("is left out when nobody was enrolled, and its second part when nobody was analysed", () => {
    const plan = planOf({ filters: [unitFilter("robots")] });
    expect(allocation(plan, reductionOf(plan, { enrolled: [0, 0] }))).toBeNull();
    const found = check({ enrolled: [500, 500], ended: { "filter:robots": [500, 500] } }, plan);
    expect(found.parts).toHaveLength(1);
    expect(found.figures).not.toHaveProperty("analysed");
  });
});
