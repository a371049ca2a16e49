import { describe, expect, it } from "vitest";
import { allocationParts } from "../../src/report/sections/allocation-by-day.ts";
import { planOf, reductionOf, variantsOf } from "../checks/make.ts";

const plan = planOf({ variants: variantsOf({ list: 1, calendar: 1 }) });
/** 2 March 2026 and the days after it; ended at two lines of the ledger. */
const days = (...units: readonly (readonly [list: number, calendar: number])[]) =>
  units.map(([list, calendar], i) => ({
    day: 20_514 + i,
    ended: [
      [10, 10],
      [list - 10, calendar - 10],
    ],
  }));
const partsOf = (found: ReturnType<typeof days> | null) =>
  allocationParts(plan, reductionOf(plan, { enrolled: [600, 600], soundness: { days: found } }));

describe("the split by day", () => {
  // 400 of a day: 0.5 -+ 2.5758 sqrt(0.25 / 400) is 43.6% to 56.4%, R 4.2.2: qnorm(0.995) is 2.575829.
  it("holds each day's share against what chance allows of the planned one", async () => {
    const [part] = await partsOf(days([200, 200], [150, 250], [190, 210]));
    expect(part?.rows).toEqual([
      { day: "2 March 2026", cells: ["400", "200", "50.0%", "43.6%", "56.4%"] },
      { day: "3 March 2026", cells: ["400", "250", "62.5%", "43.6%", "56.4%"] },
      { day: "4 March 2026", cells: ["400", "210", "52.5%", "43.6%", "56.4%"] },
    ]);
    expect(part?.sentences[0]).toBe("Planned were 50.0%; of 3 days 1 lies beyond what chance allows on 99 of 100.");
    expect(part?.drawing?.drawing.svg).toContain("3 March");
  });

  it("says so where no day is beyond, and tells each variant apart from the control", async () => {
    const three = planOf({ variants: variantsOf({ list: 1, calendar: 1, map: 1 }) });
    const found = [0, 1].map((i) => ({ day: 20_514 + i, ended: [[300, 310, 290]] }));
    const parts = await allocationParts(
      three,
      reductionOf(three, { enrolled: [600, 620, 580], soundness: { days: found } }),
    );
    expect(parts.map(({ id, title }) => [id, title])).toEqual([
      ["allocation-1", '"calendar": share of the visitors enrolled, by day'],
      ["allocation-2", '"map": share of the visitors enrolled, by day'],
    ]);
    expect(parts[0]?.sentences[0]).toBe(
      "Planned were 33.3%; of 2 days none lies beyond what chance allows on 99 of 100.",
    );
  });

  it("is not drawn of one day, nor of a log without time", async () => {
    expect(await partsOf(days([600, 600]))).toEqual([]);
    expect(await partsOf(null)).toEqual([]);
  });
});
