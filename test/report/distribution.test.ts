import { describe, expect, it } from "vitest";
import { shape } from "../../src/cells/index.ts";
import { sizeAxis } from "../../src/report/charts/distribution.ts";
import { renderReport } from "../../src/report/index.ts";
import { distributionFigures } from "../../src/report/sections/distribution.ts";
import { adopt, several } from "./cases.ts";
import { textOf } from "./markup.ts";

describe("the picture of how an arm's values lie", async () => {
  const figures = await distributionFigures(adopt.plan, adopt.reduction, adopt.effects);
  const figure = figures.get("Fare per visitor");
  if (figure === undefined) throw new Error("no figure of the fare");

  it("is drawn for each measure but a share, whose two values its table tells", () => {
    expect([...figures.keys()]).toEqual(
      adopt.plan.metrics.filter(({ summary }) => summary !== "proportion").map(({ name }) => name),
    );
  });

  it("has each arm's outline with its units and its share at 0", () => {
    // 43,800 of 50,240 and 43,500 of 49,951, by the sizes of the hand-made case
    expect(figure.arms.map(({ variant, note }) => `${variant}: ${note}`)).toEqual([
      "list: 50,240 visitors, 87.2% at 0",
      "calendar: 49,951 visitors, 87.1% at 0",
    ]);
    for (const { drawing } of figure.arms) expect(drawing.svg).toMatch(/role="img".*<title id="shape-\d+-\d+-title">/);
  });

  it("tells in words what the drawing shows", () => {
    expect(figure.arms[0]?.drawing.svg).toContain("Of those not at 0 the middle one lies between 160 and 192.");
    expect(figure.tails.svg).toMatch(/<desc[^>]*>Far out, with list [\d.]+% have 256 or more and with calendar/);
  });

  it("has a table of all its numbers, each unit in one row, below 0 first", () => {
    const sum = (v: number) => figure.rows.reduce((all, { cells }) => all + Number(cells[v]?.replaceAll(",", "")), 0);
    expect([sum(0), sum(1)]).toEqual([50_240, 49_951]);
    expect(figure.rows[0]?.size).toBe("\u221214 to \u221212");
    expect(figure.rows[1]?.size).toBe("0");
  });

  it("holds no name of the plan inside a drawing but in its title and description", () => {
    const drawn = [...figure.arms.map(({ drawing }) => drawing), figure.axis, figure.tails].map(({ svg }) =>
      svg.replace(/<(title|desc)[^>]*>.*?<\/\1>/gs, ""),
    );
    for (const svg of drawn) expect(textOf(svg)).not.toMatch(/list|calendar|Fare/);
  });

  // "0.2000" stood beside "1" on an axis of seconds
  it("writes the round numbers of its axis with their own digits", async () => {
    const quarters = [-12, -8, -4, 0, 4]; // an eighth to two
    const sizes = {
      variant: [0, 0, 0, 0, 0],
      sign: [1, 1, 1, 1, 1],
      quarter: quarters,
      units: [9, 9, 9, 9, 9],
    };
    const metrics = adopt.reduction.metrics.map((own) => (own.sizes === null ? own : { ...own, sizes }));
    const found = await distributionFigures(adopt.plan, { ...adopt.reduction, metrics }, adopt.effects);
    const axis = found.get("Fare per visitor")?.axis.svg ?? "";
    expect(textOf(axis).trim().split(/\s+/)).toEqual(["0", "0.2", "0.5", "1", "2"]);
  });

  it("stands on the page with several variants too", async () => {
    const text = textOf((await renderReport(several)).html);
    expect(text).toContain("visitors by size of their value");
  });
});

describe("the axis of sizes", () => {
  const table = (quarters: readonly number[], sign = 1) => ({
    variant: quarters.map(() => 0),
    sign: quarters.map(() => sign),
    quarter: [...quarters],
    units: quarters.map(() => 10),
  });

  it("reaches from the smallest size to the largest", () => {
    const axis = sizeAxis([shape(table([0, 40]), 0, false)], false);
    expect([axis.least, axis.most, axis.below, axis.above]).toEqual([0, Math.log2(1280), false, true]);
  });

  it("does not follow sizes under a millionth of the largest", () => {
    const { least, most } = sizeAxis([shape(table([-100, 100]), 0, false)], false);
    expect(most - least).toBe(20);
  });

  it("has a side below 0 only where a value lies there", () => {
    expect(sizeAxis([shape(table([4], -1), 0, false)], false)).toMatchObject({ below: true, above: false });
  });
});
