import { describe, expect, it } from "vitest";
import { followUp } from "../../src/checks/follow-up.ts";
import { switched } from "../../src/checks/switched.ts";
import { unknownVariants } from "../../src/checks/unknown-variants.ts";
import { withoutRows } from "../../src/checks/without-rows.ts";
import { metricOf, planOf, reductionOf } from "./make.ts";

const plan = planOf();

describe("switched", () => {
  it.each([
    [0, "pass", false],
    [10, "pass", false],
    [11, "caution", false],
    [100, "caution", false],
    [101, "caution", true],
  ])("%d of 10,000 enrolled are a %s, strong: %s", (n, result, strong) => {
    const half = Math.floor(n / 2);
    const shape = { enrolled: [5000, 5000], facts: { switched: [half, n - half] } };
    const found = switched(plan, reductionOf(plan, shape));
    expect([found?.result, found?.strong]).toEqual([result, strong]);
    expect(found?.figures).toEqual({ units: n, share: n / 10_000 });
  });

  it.each([
    [39, "pass"],
    [40, "caution"],
    [60, "caution"],
  ])("of 20 against %d in two arms of 50,000 are a %s by arm", (other, result) => {
    // as in rows.test.ts; the arms are ten times as large, which moves p by less than 0.0001
    const found = switched(plan, reductionOf(plan, { enrolled: [50_000, 50_000], facts: { switched: [20, other] } }));
    expect([found?.result, found?.strong]).toEqual([result, false]);
    expect(found?.parts[0]?.result).toBe("pass");
  });

  it("says what the plan does with them", () => {
    const excluding = planOf({ enrolment: { ...plan.enrolment, inTwoVariants: "exclude" } });
    const facts = { switched: [1, 0] };
    expect(switched(plan, reductionOf(plan, { facts }))?.sentence).toBe(
      "1 visitor of 2,000 (0.050%) was seen in two variants. It counts where first enrolled.",
    );
    expect(switched(excluding, reductionOf(excluding, { ended: { switched: [1, 1] } }))?.sentence).toBe(
      "2 visitors of 2,000 (0.10%) were seen in two variants. They are left out.",
    );
  });

  it("is left out when nobody was enrolled", () => {
    expect(switched(plan, reductionOf(plan, { enrolled: [0, 0] }))).toBeNull();
  });
});

describe("unknown variants", () => {
  // the share is of all units with an enrolling row: enrolled and unknown together
  it.each([
    [0, 10_000, "pass", false],
    [10, 9990, "pass", false],
    [11, 9989, "caution", false],
    [100, 9900, "caution", false],
    [101, 9899, "caution", true],
  ])("%d beside %d enrolled are a %s, strong: %s", (unknown, enrolled, result, strong) => {
    const shape = { enrolled: [4000, enrolled - 4000], unknownVariant: unknown };
    const found = unknownVariants(plan, reductionOf(plan, shape));
    expect([found?.result, found?.strong]).toEqual([result, strong]);
    expect(found?.figures).toMatchObject({ units: unknown, share: unknown / 10_000 });
  });

  it("names the plan's nearest variant", () => {
    const variants = [
      { value: "list", rows: 900 },
      { value: "Calender", rows: 300 },
    ];
    const found = unknownVariants(plan, reductionOf(plan, { unknownVariant: 300, facts: { variants } }));
    expect(found?.figures.names).toEqual([{ value: "Calender", rows: 300, nearest: "calendar" }]);
    expect(found?.sentence).toBe(
      '300 visitors of 2,300 (13.0%) were enrolled in a variant that the plan lacks: "Calender" (300 rows; nearest in the plan: "calendar").',
    );
  });

  it("is left out when no unit has an enrolling row", () => {
    expect(unknownVariants(plan, reductionOf(plan, { enrolled: [0, 0] }))).toBeNull();
  });
});

describe("follow-up", () => {
  const followed = planOf({ followUp: { days: 7, incomplete: "exclude" } });
  it.each([
    [0, "pass"],
    [1000, "pass"],
    [1001, "caution"],
    [9999, "caution"],
  ])("%d of 10,000 that reached the line are a %s", (n, result) => {
    const half = Math.floor(n / 2);
    const found = followUp(
      followed,
      reductionOf(followed, { enrolled: [5000, 5000], ended: { "follow-up": [half, n - half] } }),
    );
    expect([found?.result, found?.strong]).toEqual([result, false]);
    expect(found?.figures).toEqual({ units: n, share: n / 10_000 });
  });

  it("does not count units that ended on an earlier line", () => {
    const both = { ...followed, enrolment: { ...followed.enrolment, inTwoVariants: "exclude" as const } };
    const ended = { switched: [4000, 4000], "follow-up": [100, 101] };
    expect(followUp(both, reductionOf(both, { enrolled: [5000, 5000], ended }))?.figures.share).toBe(201 / 2000);
  });

  it("is left out without follow-up, and where units not followed to the end are kept", () => {
    const kept = planOf({ followUp: { days: 7, incomplete: "keep" } });
    expect(followUp(plan, reductionOf(plan))).toBeNull();
    expect(followUp(kept, reductionOf(kept))).toBeNull();
    expect(followUp(followed, reductionOf(followed, { enrolled: [0, 0] }))).toBeNull();
  });
});

describe("without-rows", () => {
  const leaving = planOf({
    metrics: [
      metricOf({ name: "Booked", role: "primary" }),
      metricOf({ name: "Page time", summary: "mean", withoutRows: "leave-out" }),
      metricOf({ name: "Slowest page", summary: "mean", withoutRows: "leave-out" }),
    ],
  });

  it("has a part for each metric that leaves units out, named like it", () => {
    const found = withoutRows(leaving, reductionOf(leaving));
    expect(found?.parts.map((part) => part.about)).toEqual(["Page time", "Slowest page"]);
  });

  // a caution told of "0 units of 2,000 (0%)", and asked to read the metric as one of some of them
  it("passes where nobody is left out, and cautions from the first", () => {
    const of = (left: number) => withoutRows(leaving, reductionOf(leaving, { leftOut: { "Page time": [left, 0] } }));
    expect(of(0)).toMatchObject({
      result: "pass",
      sentence: "Page time: no visitor is left out, each has a value.",
      remedy: "",
    });
    expect(of(1)?.result).toBe("caution");
  });

  // R 4.2.2: as in rows.test.ts: 100 against 139 and 140 of 5,000: 0.01066775438, 0.008960910391; against 151 and 152:
  // 0.001113070482, 0.000907415588
  it.each([
    [139, "caution", 0.01066775438],
    [140, "caution", 0.008960910391],
    [151, "caution", 0.001113070482],
    [152, "fail", 0.000907415588],
  ])("100 against %d left out of 5,000 each is a %s", (other, result, p) => {
    const shape = { enrolled: [5000, 5000], leftOut: { "Slowest page": [100, other] } };
    const found = withoutRows(leaving, reductionOf(leaving, shape));
    expect(found?.result).toBe(result);
    expect(found?.parts[0]).toMatchObject({ about: "Page time", result: "pass" });
    expect(found?.parts[1]?.figures.p).toBeCloseTo(p, 10);
    expect(found?.parts[1]?.figures.units).toEqual({ list: 100, calendar: other });
    expect(found?.parts[1]?.sentence.includes("Chance alone")).toBe(p < 0.01);
  });

  it("has no p where all or none are left out", () => {
    const all = withoutRows(leaving, reductionOf(leaving, { leftOut: { "Page time": [1000, 1000] } }));
    expect(all?.parts.map((part) => Object.keys(part.figures))).toEqual([
      ["units", "share"],
      ["units", "share"],
    ]);
  });

  it("is left out where every metric counts every unit", () => {
    expect(withoutRows(plan, reductionOf(plan))).toBeNull();
  });
});
