import { describe, expect, it } from "vitest";
import type { Arm } from "../../src/cells/types.ts";
import { conclusion, effectSentence, effects, withOrderStatistics } from "../../src/decision/index.ts";
import type { Plan } from "../../src/plan/types.ts";
import { metricOf, planOf, reductionOf, variantsOf } from "../checks/make.ts";
import { sumsTogether } from "../stats/arms.ts";

const PAGE_TIME = metricOf({
  name: "Page time",
  role: "primary",
  summary: "quantile",
  quantile: "0.5",
  of: { event: "page", where: [], aggregate: { kind: "max", column: "seconds" } },
  unitOfMeasure: "s",
  goodIs: "lower",
  withoutRows: "leave-out",
});

function planFor(names: readonly string[], metrics = [PAGE_TIME]): Plan {
  return planOf({ metrics, variants: variantsOf(Object.fromEntries(names.map((name) => [name, 1]))) });
}

/** The arms of quantiles as the report makes them, their order statistics looked up in the values at hand. */
function ordered(plan: Plan, values: readonly (readonly number[])[]): Promise<(readonly Arm[])[]> {
  const sums = sumsTogether(values);
  const bare = plan.metrics.map(({ quantile }) =>
    sums.map((own): Arm => ({ kind: "quantile", sums: own, q: quantile ?? "", ordered: new Map() })),
  );
  const sorted = values.map((own) => [...own].sort((a, b) => a - b));
  return withOrderStatistics(plan, bare, async (_, variant, ranks) =>
    ranks.map((rank) => BigInt(sorted[variant]?.[rank - 1] ?? Number.NaN) * 10n ** 9n),
  );
}

const range = (n: number, from: number) => Array.from({ length: n }, (_, i) => from + i);
const said = async (plan: Plan, values: readonly (readonly number[])[]) => {
  const [effect] = effects(plan, await ordered(plan, values), reductionOf(plan));
  return effect === undefined ? "" : effectSentence(effect, plan);
};

describe("the effect on a quantile", () => {
  // n 100, q 1/2, h = 5. z: 1.959964 and, for two intervals at once, qnorm(1 - .05 / 4) = 2.241403 (R 4.2.2): z h = 9.80, so
  // ranks 40 and 60; 11.21, so 38 and 62. Both arms are a step apart, so the ends move by 10 or 12 in each.
  it.each([
    [["list", "calendar"], 10],
    [["list", "calendar", "map"], 12],
  ])("is held for all variants of %j at once by Bonferroni's, and p by as many", async (names, distance) => {
    const plan = planFor(names);
    const arms = await ordered(plan, [range(100, 101), ...names.slice(1).map(() => range(100, 113))]);
    const [first] = effects(plan, arms, reductionOf(plan));
    expect(first?.contrast.difference).toMatchObject({
      estimate: 12,
      z: null,
      standardError: null,
      method: "quantile",
    });
    expect(first?.contrast.difference.low).toBeCloseTo(12 - distance * Math.SQRT2, 12);
    expect(first?.contrast.difference.high).toBeCloseTo(12 + distance * Math.SQRT2, 12);
    // k steps of each arm reach k sqrt(2): 8 stay under 12, 9 do not; eight steps are z h = 8. R: 2 * pnorm(-8 / 5)
    expect(first?.contrast.difference.p).toBeCloseTo(0.109598583, 9);
    expect(first?.pAdjusted).toBeCloseTo(0.109598583 * (names.length - 1), 8);
    expect(first?.power).toEqual({ detectable: null, unitsForWorthwhile: null, exaggeration: null });
  });

  it("is pointwise for a metric for information", async () => {
    const plan = planFor(["list", "calendar", "map"], [{ ...PAGE_TIME, role: "secondary" }]);
    const arms = await ordered(plan, [range(100, 101), range(100, 113), range(100, 113)]);
    const [first] = effects(plan, arms, reductionOf(plan));
    expect(first?.contrast.difference.low).toBeCloseTo(12 - 10 * Math.SQRT2, 12);
  });

  it("shows the arms with their quantile, units and ends, and without what a quantile has not", async () => {
    const plan = planFor(["list", "calendar"]);
    const [first] = effects(plan, await ordered(plan, [range(100, 101), range(90, 113)]), reductionOf(plan));
    const none = { sd: null, skewness: null, kurtosis: null, total: null };
    expect(first?.contrast.control).toEqual({ units: 100, mean: 150, smallest: 101, largest: 200, ...none });
    expect(first?.contrast.variant).toEqual({ units: 90, mean: 157, smallest: 113, largest: 202, ...none });
  });

  it("is told with the quantile's own name, and who has one", async () => {
    const plan = planFor(["list", "calendar"]);
    const values = [range(100, 1001), range(100, 1101)];
    expect(await said(plan, values)).toBe(
      'Page time: of visitors with a value the median was 1,150 s with "calendar" and 1,050 s with "list", 9.5% higher (95% interval: 8.1% to 10.9% higher).',
    );
    const upper = planFor(["list", "calendar"], [{ ...PAGE_TIME, quantile: "0.8", withoutRows: "zero" }]);
    expect(await said(upper, values)).toContain(
      'Page time: the 80th percentile was 1,180 s with "calendar" and 1,080 s with "list", 9.3% higher',
    );
  });

  it("says why it has no interval, or none on one side", async () => {
    const plan = planFor(["list", "calendar"]);
    expect(await said(plan, [Array<number>(50).fill(3), Array<number>(60).fill(4)])).toBe(
      'Page time: of visitors with a value the median was 4 s with "calendar" and 3 s with "list". No interval can be given, since too many visitors have the very same value for an interval to have a width.',
    );
    expect(await said(plan, [range(3, 1), range(3, 2)])).toContain(
      "No interval can be given, since one of the groups has too few visitors with a value to say how far it can be off.",
    );
    // n 20, q 0.9: rank 16 exists and 21 does not.
    const upper = planFor(["list", "calendar"], [{ ...PAGE_TIME, quantile: "0.9" }]);
    expect(await said(upper, [range(200, 101), range(20, 301)])).toContain(
      "13.6% higher (95% interval: at least 9.9% higher).",
    );
  });

  it("has no zone but not settled without a width, however far apart the arms are", async () => {
    const plan = planFor(["list", "calendar"]);
    const arms = await ordered(plan, [Array<number>(50).fill(3), Array<number>(60).fill(4)]);
    const [first] = effects(plan, arms, reductionOf(plan));
    expect(first?.zone).toBe("not-settled");
    expect(first?.contrast.difference).toMatchObject({ estimate: 1, low: null, high: null, p: null });
  });
});

describe("the conclusion on a quantile", () => {
  it("compares the best two of several variants too", async () => {
    const plan = planFor(["list", "calendar", "map"]);
    const arms = await ordered(plan, [range(100, 1001), range(100, 901), range(100, 801)]);
    const found = conclusion(plan, effects(plan, arms, reductionOf(plan)), [], reductionOf(plan), arms, []);
    expect(found.decision).toBe("adopt");
    expect(found.variant).toBe("map");
    expect(found.reasons.at(-1)).toMatch(
      /^Between the two, Page time: .* 850 s with "map" and 950 s with "calendar", 10/,
    );
  });
});

describe("order statistics", () => {
  it("that were not asked for are our mistake, with the rank", async () => {
    const plan = planFor(["list", "calendar"]);
    const [arms] = await ordered(plan, [range(100, 101), range(100, 113)]);
    const bare = (arms ?? []).map((arm) => (arm.kind === "quantile" ? { ...arm, ordered: new Map() } : arm));
    expect(() => effects(plan, [bare], reductionOf(plan))).toThrow("rank 50 of 100 was not asked for: 0 are known");
  });

  it("are none where there is no quantile, and the arms stay as they are", async () => {
    const metric = metricOf({ name: "Booked", role: "primary" });
    const [sums] = sumsTogether([[1, 0]]);
    if (sums === undefined) throw new Error("no sums");
    const arms: Arm[][] = [[{ kind: "proportion", sums }]];
    const refused = async () => Promise.reject(new Error("asked"));
    expect(await withOrderStatistics(planOf({ metrics: [metric] }), arms, refused)).toEqual(arms);
  });
});
