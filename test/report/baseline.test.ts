import { describe, expect, it } from "vitest";
import { loadPlan } from "../../src/plan/index.ts";
import { baselineTable, largest } from "../../src/report/sections/baseline.ts";
import { reduced } from "../engine/small.ts";

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

  it("are not shown where the plan names nothing that was known of them", async () => {
    expect(await tableOf("")).toBe(null);
  });

  it("tell the largest difference of several variants, with its sign", () => {
    expect([largest([0.01, -0.2, null]), largest([null]), largest([])]).toEqual(["\u22120.200", "\u2013", "\u2013"]);
  });
});
