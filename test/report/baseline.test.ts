import { describe, expect, it } from "vitest";
import { loadPlan } from "../../src/plan/index.ts";
import { renderReport } from "../../src/report/index.ts";
import { baselineTable, largest } from "../../src/report/sections/baseline.ts";
import { consortTable } from "../../src/report/sections/consort.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import { reduced } from "../engine/small.ts";
import { adopt } from "./cases.ts";

const PLAN = (more: string) => `experiment: Small
question: Were the groups alike?
unit-called: {one: visitor, many: visitors}
log:
  - files: log.csv
    columns: {unit: visitor, event: event, variant: arm}
variants: [{name: list, control: true}, {name: calendar}]
metrics: [{name: Fare, role: primary, summary: mean, of: {sum: fare}${more}}]
`;
const LOG = `visitor,event,arm,fare,past
a,s,list,1,10
b,s,list,2,20
c,s,list,3,
d,s,calendar,4,12
e,s,calendar,5,16
f,s,calendar,6,26
`;

async function tableOf(more: string) {
  const loaded = loadPlan(PLAN(more));
  if (!("plan" in loaded)) throw new Error("the plan of the test is wrong");
  const { reduction } = await reduced(PLAN(more), { "log.csv": LOG });
  return baselineTable(loaded.plan, reduction);
}

const levelsInBoth: ReportInputs = {
  ...adopt,
  reduction: {
    ...adopt.reduction,
    facts: {
      ...adopt.reduction.facts,
      subgroups: [
        {
          column: "country",
          levels: [
            { level: { kind: "value", text: "NO" }, enrolled: [30, 31] },
            { level: { kind: "value", text: "other" }, enrolled: [20, 18] },
            { level: { kind: "rest", levels: 4 }, enrolled: [9, 8] },
          ],
        },
        {
          column: "platform",
          levels: [
            { level: { kind: "value", text: "phone" }, enrolled: [50, 52] },
            { level: { kind: "missing" }, enrolled: [9, 5] },
          ],
        },
      ],
    },
  },
};

describe("the groups before enrolment", () => {
  it("stand side by side with mean, spread and number, and the standardised difference", async () => {
    const table = await tableOf(", adjust-for: {column: past}");
    // by hand: 10, 20 have mean 15 and variance 50; 12, 16, 26 mean 18 and variance 52; 3 / sqrt(51) = 0.420
    expect(table?.rows).toEqual([
      {
        what: '"past" at enrolment',
        cells: [
          { figure: "15", beside: "(7.071), 2 visitors" },
          { figure: "18", beside: "(7.211), 3 visitors" },
        ],
        standardised: "0.420",
      },
    ]);
  });

  it("are shown by the values of each subgroup, as shares of the enrolled, with subgroups alone", async () => {
    const plan = `${PLAN("")}subgroups: [country]\nfilters: [{name: staff, drop: units, when: ever, where: {staff: yes}}]\n`;
    const loaded = loadPlan(plan);
    if (!("plan" in loaded)) throw new Error("the plan of the test is wrong");
    const rows = ["a,NO", "b,NO", "c,SE", "d,"].map((row) => `${row},s,list,1,`);
    const others = ["e,NO", "f,SE", "g,SE"].map((row) => `${row},s,calendar,1,`);
    const log = ["visitor,country,event,arm,fare,staff", ...rows, ...others, "h,SE,s,calendar,1,yes", ""].join("\n");
    const { reduction, units } = await reduced(plan, { "log.csv": log });
    expect(units["filter:staff"]).toBe(1); // enrolled all the same
    const table = baselineTable(loaded.plan, reduction);
    // by hand: SE 1 of 4 and 3 of 4, variances 1/4 and 1/4, 0.5 / 0.5; NO 2 and 1 of 4, 1/3 and 1/4, -0.25 / sqrt(7/24);
    // no value 1 and 0 of 4, 1/4 and 0, -0.25 / sqrt(1/8)
    const [country] = table?.columns ?? [];
    expect(country?.head).toBe('"country" at enrolment');
    expect(country?.rows.map(({ what, standardised }) => [what, standardised])).toEqual([
      ["SE", "1.000"],
      ["NO", "\u22120.463"],
      ["No value", "\u22120.707"],
    ]);
    expect(country?.rows[0]?.cells).toEqual([
      { figure: "25.0%", beside: "1" },
      { figure: "75.0%", beside: "3" },
    ]);
    expect(table?.reading).toContain("share of all visitors enrolled");
    expect(table?.reading).not.toContain("Mean with");
    const [item] = consortTable(loaded.plan, reduction, table !== null, null).rows.filter(
      (row) => row.item2010 === "15",
    );
    expect(item?.place?.id).toBe("before");
  });

  it("name each column once on the page, its values under it", async () => {
    const html = (await renderReport(levelsInBoth)).html;
    const table = /<table[^>]*>\s*<caption id="before-caption">.*?<\/table>/s.exec(html)?.[0] ?? "no table";
    const heads = [...table.matchAll(/<th scope="(rowgroup|row)"( colspan="4")?>([^<]*)</g)].map(
      ([, scope, spans, text]) => `${scope}${spans === undefined ? "" : ", across"}: ${text}`,
    );
    expect(heads).toEqual([
      "rowgroup, across: \u201ccountry\u201d at enrolment",
      "row: NO",
      "row: other",
      "row: The 4 other values",
      "rowgroup, across: \u201cplatform\u201d at enrolment",
      "row: phone",
      "row: No value",
    ]);
  });

  it("are not shown where the plan names nothing that was known of them", async () => {
    expect(await tableOf("")).toBe(null);
  });

  it("tell the largest difference of several variants, with its sign", () => {
    expect([largest([0.01, -0.2, null]), largest([null]), largest([])]).toEqual(["\u22120.200", "\u2013", "\u2013"]);
  });
});
