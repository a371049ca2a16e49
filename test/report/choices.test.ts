import { describe, expect, it } from "vitest";
import { choiceAxis, choiceStrip } from "../../src/report/charts/choices.ts";
import { draw } from "../../src/report/charts/draw.ts";
import { choiceText, unchanged } from "../../src/report/choice-words.ts";
import { choiceFigures } from "../../src/report/sections/choices.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import { adopt } from "./cases.ts";
import { booked, contacts, fare, farePlan, perSearch } from "./plans.ts";

const figuresOf = async ({ plan, effects, choices }: ReportInputs, metric: string) =>
  (await choiceFigures(plan, effects, choices)).get(metric) ?? [];

describe("the figure of other reasonable choices", () => {
  it("has one row a choice, the plan's own first and marked, with its figures as page one has them", async () => {
    const [figure] = await figuresOf(adopt, "Booked");
    expect(
      figure?.rows.map(({ choice, isPlanned, estimate, interval, stands }) => [
        choice,
        isPlanned,
        estimate,
        interval,
        stands,
      ]),
    ).toEqual([
      ["As planned", true, "+10.0%", "(+6.5% to +13.7%)", "better by over 5%"],
      ["Visitors not followed to the end kept", false, "+10.1%", "(+6.6% to +13.8%)", "the same"],
      [
        "Without visitors enrolled on the first day",
        false,
        "+8.1%",
        "(+4.5% to +11.9%)",
        "differs: better; 5% not settled",
      ],
      ["Score interval", false, "+10.0%", "(+6.5% to +13.7%)", "the same"],
    ]);
  });

  it("counts what differs, says what that count is, and names the choices that change nothing", async () => {
    const [figure] = await figuresOf(adopt, "Booked");
    expect(figure?.sentences).toEqual([
      "1 of 3 other choices puts it elsewhere: without visitors enrolled on the first day.",
      "The choices share the data: this counts fragility, not evidence.",
      "Not listed, since nothing would change or nothing be left: without visitors seen with two variants.",
    ]);
    const [calm] = await figuresOf(adopt, "Support contacts");
    expect(calm?.sentences[0]).toBe("All 2 other choices put it where the plan\u2019s own does.");
  });

  it("says of the logarithm on which side the difference is and its p, and draws no interval for it", async () => {
    const [figure] = await figuresOf(adopt, "Fare per visitor");
    const row = figure?.rows.at(-1);
    expect([row?.choice, row?.estimate, row?.interval, row?.stands]).toEqual([
      "Logarithm of 1 + the value",
      "higher, p < 0.0001",
      "",
      "the same",
    ]);
    expect(row?.drawing?.svg).not.toContain("8h-8Z");
  });

  it("keeps every figure in a table, six digits each", async () => {
    const [figure] = await figuresOf(adopt, "Fare per visitor");
    expect(figure?.numberColumns).toEqual(["difference", "low", "high", "relative", "low", "high", "p", "the same"]);
    const planned = figure?.numbers[0]?.cells ?? [];
    expect(planned[0]).toBe("7.5");
    expect(planned.at(-1)).toBe("yes");
    expect(figure?.numbers.map(({ cells }) => cells.length)).toEqual([8, 8, 8, 8, 8]);
  });

  it("is left out where the plan's own choice is the only one", async () => {
    const choices = adopt.choices.map((one) => ({ ...one, rows: one.rows.slice(0, 1) }));
    expect(await figuresOf({ ...adopt, choices }, "Booked")).toEqual([]);
  });

  it("stands on the difference itself where the plan's amount is absolute, or the relative one is not shown", async () => {
    const plan = { ...farePlan, metrics: [{ ...booked, worthwhile: { kind: "absolute", value: 0.005 } as const }] };
    const [points] = await figuresOf({ ...adopt, plan, choices: adopt.choices.slice(0, 1) }, "Booked");
    expect(points?.plotHead).toBe("Difference in percentage points");
    expect(points?.rows[0]?.estimate).toBe("+1.20 points");
    expect(points?.axis?.svg).toContain("+1</text>");
  });
});

describe("a row of the figure", () => {
  const mark = (low: number, estimate: number, high: number, isPlanned: boolean) => ({
    interval: { estimate, low, high },
    isPlanned,
  });

  it("has a filled square for the plan's own choice, a hollow one for another, and the plan's estimate as a dotted line", async () => {
    const rows = [mark(0.05, 0.1, 0.15, true), mark(0.02, 0.08, 0.14, false)];
    const axis = choiceAxis(rows, 0.05);
    const [own, other, none] = await Promise.all(
      [rows[0] ?? null, rows[1] ?? null, null].map((row) => draw(choiceStrip(row, 0.1, 0.05, axis), "c", null)),
    );
    const at = (x: number) => Number(((300 * (x - axis.low)) / (axis.high - axis.low)).toFixed(2));
    expect(own?.svg).toMatch(new RegExp(`translate\\(${at(0.1)},200\\)" d="M-4,-4h8v8h-8Z" fill="currentColor"`));
    expect(other?.svg).toMatch(
      new RegExp(`translate\\(${at(0.08)},200\\)" d="M-4,-4h8v8h-8Z" fill="var\\(--paper\\)"`),
    );
    for (const drawing of [own, other, none]) expect(drawing?.svg).toContain('stroke-dasharray="1,3"');
    expect(none?.svg).not.toContain("8h-8Z");
  });

  it("shares one axis with the others, from the lowest end to the highest, the mark and zero within", () => {
    const axis = choiceAxis([mark(0.05, 0.1, 0.15, true), mark(-0.2, 0.08, 0.36, false)], 0.4);
    expect(axis.low).toBeLessThan(-0.2);
    expect(axis.high).toBeGreaterThan(0.4);
  });
});

describe("a choice in words", () => {
  it("names what is changed, by the plan's word for its units", () => {
    expect(choiceText("other-way-in-two-variants", fare, farePlan)).toBe("without visitors seen with two variants");
    const exclude = { ...farePlan, enrolment: { ...farePlan.enrolment, inTwoVariants: "exclude" as const } };
    expect(choiceText("other-way-in-two-variants", fare, exclude)).toBe(
      "visitors seen with two variants kept where first enrolled",
    );
    expect(choiceText("without-largest", perSearch, farePlan)).toBe(
      "without the visitor of each group that moves the ratio most",
    );
  });

  it("is told as not listed only where a reader would look for it", () => {
    expect(unchanged(booked, farePlan, [])).toEqual([
      "other-way-in-two-variants",
      "any-follow-up",
      "without-first-day",
    ]);
    expect(unchanged(fare, farePlan, ["any-follow-up"])).toEqual([
      "no-cap",
      "cap-0.99",
      "other-way-in-two-variants",
      "without-first-day",
    ]);
    const timeless = {
      ...farePlan,
      followUp: null,
      log: farePlan.log.map((one) => ({ ...one, columns: { ...one.columns, time: null } })),
    };
    expect(unchanged(contacts, timeless, [])).toEqual(["cap-0.99", "cap-0.999", "other-way-in-two-variants"]);
  });
});
