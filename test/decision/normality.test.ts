import { describe, expect, it } from "vitest";
import { bucketsOf } from "../../src/decision/buckets.ts";
import { decided } from "../../src/decision/decided.ts";
import { contrastFigures, deciding, type Effect, otherIntervalSentence } from "../../src/decision/index.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import { generator } from "../../src/stats/generator.ts";
import { isAbsent, isNotDrawn, normalUpperTail, type Resampled } from "../../src/stats/index.ts";
import type { PairUnit } from "../cells/tables.ts";
import { metricOf, planOf, variantsOf } from "../checks/make.ts";
import { contrastOf, effectOf, FARE } from "./make.ts";
import { effectsOfUnits, pairsOfUnits, reductionOfUnits } from "./make-cells.ts";

const MEAN = metricOf({ name: "Fare", role: "primary", summary: "mean" });

function planWith(
  metric: Metric,
  interval: Plan["decision"]["interval"] = "normal",
  names = ["list", "calendar"],
): Plan {
  const plan = planOf({ metrics: [metric], variants: variantsOf(Object.fromEntries(names.map((name) => [name, 1]))) });
  return { ...plan, decision: { ...plan.decision, interval } };
}

/** Units with a long tail; x goes along with y. The same for every run. */
function skewedUnits(sizes: readonly number[], missing = false): PairUnit[] {
  const next = generator([7, 5, 3, 1]);
  const one = () => -Math.log((next() + 1) / 2 ** 32);
  return sizes.flatMap((n, variant) =>
    Array.from({ length: n }, (_, i): PairUnit => {
      const x = Number(one().toFixed(4));
      const y = Number((2 * x + one()).toFixed(4));
      return [variant, (i * 31 + variant * 7) % 1024, y, missing && i % 9 === 0 ? null : x];
    }),
  );
}

const drawnOf = ({ resampled }: Effect): Extract<Resampled["bootstrap"], { draws: number }> => {
  if (resampled === null || isNotDrawn(resampled.bootstrap)) throw new Error("nothing was drawn");
  return resampled.bootstrap;
};

describe("the normality of an effect", () => {
  it("is at the critical value that decides: pointwise for information, Dunnett's where several variants decide", async () => {
    const units = skewedUnits([900, 400, 400]);
    const names = ["list", "calendar", "map"];
    const [deciding0] = await effectsOfUnits(planWith(MEAN, "normal", names), units);
    const [forInformation] = await effectsOfUnits(planWith({ ...MEAN, role: "secondary" }, "normal", names), units);
    expect(forInformation?.normality?.tails.nominal).toBeCloseTo(0.025, 14);
    expect(deciding0?.normality?.critical).toBe(deciding0?.contrast.critical);
    expect(deciding0?.normality?.tails.nominal).toBe(normalUpperTail(deciding0?.contrast.critical ?? 0));
    expect(deciding0?.normality?.critical).toBeGreaterThan(2.1);
  });

  it("is null for a quantile, and where an arm has no spread", async () => {
    const quantile = { ...MEAN, summary: "quantile" as const, quantile: "0.5" };
    await expect(effectsOfUnits(planWith(quantile), skewedUnits([50, 50]))).rejects.toThrow("rank");
    const still = await effectsOfUnits(planWith(MEAN), [
      [0, 1, 2, null],
      [0, 2, 2, null],
      [1, 1, 2, null],
    ]);
    expect(still.map(({ normality, resampled }) => [normality, resampled])).toEqual([[null, null]]);
  });

  it("draws 4,000 times for what decides and 1,000 times for information", async () => {
    const units = skewedUnits([300, 200]);
    const [first] = await effectsOfUnits(planWith(MEAN), units);
    const [second] = await effectsOfUnits(planWith({ ...MEAN, role: "secondary" }), units);
    expect([first, second].map((effect) => effect && drawnOf(effect).draws)).toEqual([4000, 1000]);
  });

  it("is drawn at fewer units too where figures are: of what decides, and of all where there are up to 12 effects", async () => {
    const sizes = async (variants: number, role: Metric["role"]) => {
      const names = Array.from({ length: variants }, (_, v) => (v === 0 ? "list" : `offer ${v}`));
      const units = skewedUnits(names.map(() => 40));
      const found = await effectsOfUnits(planWith({ ...MEAN, role }, "normal", names), units);
      return new Set(found.map((effect) => drawnOf(effect).drawn.length));
    };
    expect(await sizes(13, "secondary")).toEqual(new Set([3]));
    expect(await sizes(14, "secondary")).toEqual(new Set([0]));
    expect(await sizes(14, "primary")).toEqual(new Set([3]));
  });

  it("repeats itself whatever the order of the units, and draws anew for other values", async () => {
    const units = skewedUnits([300, 200]);
    const drawn = async (of: readonly PairUnit[]) => (await effectsOfUnits(planWith(MEAN), of))[0]?.resampled;
    expect(await drawn(units.toReversed())).toEqual(await drawn(units));
    const [[variant, bucket, y, x] = [0, 0, 0, 0], ...others] = units;
    expect(await drawn([[variant, bucket, y + 0.0001, x], ...others])).not.toEqual(await drawn(units));
  });

  it("has draws whose interval lies near the skew-corrected one, each on its side of the plain one", async () => {
    const [effect] = await effectsOfUnits(planWith(MEAN), skewedUnits([4000, 400]));
    if (effect === undefined) throw new Error("no effect");
    const { low: plainLow, high: plainHigh, standardError } = effect.contrast.difference;
    const corrected = effect.normality?.corrected;
    const { low, high } = drawnOf(effect);
    expect(corrected?.high).toBeGreaterThan(plainHigh ?? 0);
    expect(high).toBeGreaterThan(plainHigh ?? 0);
    expect(Math.abs(high - (corrected?.high ?? 0))).toBeLessThan(0.35 * (standardError ?? 0));
    expect(Math.abs(low - (corrected?.low ?? 0))).toBeLessThan(0.35 * (standardError ?? 0));
    expect(low).toBeGreaterThan((plainLow ?? 0) - 0.3 * (standardError ?? 0));
  });

  it("is, of a ratio, that of its score with its denominator's part", async () => {
    const ratio = metricOf({ name: "Per search", role: "primary", summary: "ratio-of-totals" });
    const [effect] = await effectsOfUnits(planWith(ratio), skewedUnits([800, 300]));
    expect(effect?.normality?.tails.expansions.own.lean).not.toBe(0);
    expect(effect?.normality?.largest?.control).not.toBeNull();
    expect(effect && drawnOf(effect).undefinedDraws).toBe(0);
  });
});

describe("the normality of an adjusted effect", () => {
  const adjusted = { ...MEAN, adjustFor: { kind: "days-before", days: 7 } as const };

  it.each([false, true])("is of the adjusted values, with missing covariates %s", async (missing) => {
    const units = skewedUnits([900, 500], missing);
    const [effect] = await effectsOfUnits(planWith(adjusted), units);
    if (effect?.adjusted == null) throw new Error("not adjusted");
    const { theta, centre } = effect.adjusted;
    const values = (v: number) =>
      units.filter(([variant]) => variant === v).map(([, , y, x]) => y - theta * (x === null ? 0 : x - centre));
    const skewness = (of: readonly number[]) => {
      const mean = of.reduce((a, b) => a + b, 0) / of.length;
      const m = (k: number) => of.reduce((sum, value) => sum + (value - mean) ** k, 0) / of.length;
      return m(3) / m(2) ** 1.5;
    };
    const { control, variant, difference } = deciding(effect);
    expect(control.skewness).toBeCloseTo(skewness(values(0)), 9);
    expect(variant.skewness).toBeCloseTo(skewness(values(1)), 9);
    // Rule of thumb: 355 times the larger squared skewness of the adjusted values, and not of the plain ones.
    const square = Math.max(skewness(values(0)) ** 2, skewness(values(1)) ** 2);
    expect(effect.normality?.unitsByRule.kohavi).toBe(Math.ceil(355 * square));
    // The bootstrap-t interval is about the adjusted estimate, with the slope found anew: near the adjusted one.
    const { low, high } = drawnOf(effect);
    const width = (difference.high ?? 0) - (difference.low ?? 0);
    expect(Math.abs(low - (difference.low ?? 0))).toBeLessThan(0.12 * width);
    expect(Math.abs(high - (difference.high ?? 0))).toBeLessThan(0.12 * width);
  });

  it("is drawn from the values with a missing covariate at the mean of both groups", async () => {
    const [plan, units] = [planWith(adjusted), skewedUnits([900, 500], true)];
    const reduction = reductionOfUnits(plan, units);
    const [pair] = await pairsOfUnits(plan, reduction, units);
    const [own] = reduction.metrics;
    if (own === undefined || pair === undefined || isAbsent(pair.found)) throw new Error("not adjusted");
    const { cells } = bucketsOf(adjusted, own, 2)?.(0, 1, true) ?? {};
    if (cells?.kind !== "adjusted") throw new Error("not drawn as adjusted");
    const sum = (values: Float64Array) => values.reduce((a, b) => a + b, 0);
    const having = units.flatMap(([, , , x]) => (x === null ? [] : [x]));
    const mean = having.reduce((a, b) => a + b, 0) / having.length;
    const all = cells.pivots[1] + (cells.scales[1] * (sum(cells.control.x) + sum(cells.variant.x))) / units.length;
    expect(all).toBeCloseTo(mean, 9);
    expect(sum(cells.control.n) + sum(cells.variant.n)).toBe(1400);
  });

  it("lets the corrected interval of the adjusted values decide where the plan says so", async () => {
    const [effect] = await effectsOfUnits(planWith(adjusted, "skew-corrected"), skewedUnits([900, 500]));
    if (effect === undefined) throw new Error("no effect");
    expect(deciding(effect).difference).toMatchObject({
      method: "skew-corrected",
      low: effect.normality?.corrected.low,
      high: effect.normality?.corrected.high,
    });
    expect(effect.contrast.difference.method).toBe("skew-corrected");
  });
});

describe("the interval of a plan that asks for the skew-corrected one", () => {
  it("decides, with the zone, the p and the adjusted p", async () => {
    const units = skewedUnits([2000, 300]);
    const [plain] = await effectsOfUnits(planWith(MEAN), units);
    const [corrected] = await effectsOfUnits(planWith(MEAN, "skew-corrected"), units);
    expect(plain?.normality?.other?.difference).toEqual(corrected?.contrast.difference);
    expect(corrected?.normality?.other?.difference).toEqual(plain?.contrast.difference);
    expect(corrected?.pAdjusted).toBe(corrected?.contrast.difference.p);
    expect(contrastFigures(corrected ?? raise())).toMatchObject({ method: "skew-corrected", control: "list" });
  });

  it("has none other beside a score interval", async () => {
    const share = metricOf({ name: "Booked", role: "primary" });
    const units = skewedUnits([300, 300]).map(
      ([v, bucket], i): PairUnit => [v, bucket, v === 0 && i < 4 ? 1 : i % 10 === 0 ? 1 : 0, null],
    );
    const few = units.map(([v, b, y]): PairUnit => [v, b, v === 0 ? (b === 31 ? 1 : 0) : y, null]);
    const [effect] = await effectsOfUnits(planWith(share), few);
    expect(effect?.contrast.difference.method).toBe("score");
    expect(effect?.normality?.other).toBeNull();
  });
});

function raise(): never {
  throw new Error("no effect");
}

describe("the sentence on the other interval", () => {
  const fare = { ...FARE, role: "primary" as const };
  const plan = planOf({ metrics: [fare] });
  /** An effect with one relative interval and another beside it. */
  const effectWith = (
    own: readonly [number, number, number],
    other: readonly [number, number, number] | null,
    counts: "normal" | "welch" | "skew-corrected" = "normal",
  ): Effect => {
    const method = (of: "normal" | "welch" | "skew-corrected", ends: readonly [number, number, number]) => {
      const contrast = contrastOf(100, ends);
      return { ...contrast, difference: { ...contrast.difference, method: of } };
    };
    const beside = counts === "skew-corrected" ? "normal" : "skew-corrected";
    return {
      ...effectOf(fare, method(counts, own)),
      normality: {
        tails: {} as never,
        corrected: { low: 0, high: 0, p: 1, skew: 0.1 },
        unitsForTails: null,
        unitsByRule: { kohavi: 1, cochran: 1 },
        largest: null,
        critical: 1.96,
        other: other === null ? null : method(beside, other),
      },
    };
  };

  it("says both and that the conclusion stays where the zone does", () => {
    const effect = effectWith([0.02, 0.06, 0.1], [0.025, 0.06, 0.11]);
    expect(otherIntervalSentence(effect, plan, [effect])).toBe(
      "The corrected interval is 2.5% to 11.0% higher, the normal one 2.0% to 10.0% higher; the conclusion stays.",
    );
  });

  it("calls Welch's interval by his name alone", () => {
    const effect = effectWith([0.02, 0.06, 0.1], [0.025, 0.06, 0.11], "welch");
    expect(otherIntervalSentence(effect, plan, [effect])).toBe(
      "The corrected interval is 2.5% to 11.0% higher, Welch\u2019s 2.0% to 10.0% higher; the conclusion stays.",
    );
  });

  it("says what the conclusion changes to", () => {
    const effect = effectWith([0.002, 0.05, 0.1], [-0.004, 0.05, 0.11]);
    expect(otherIntervalSentence(effect, plan, [effect])).toBe(
      "The corrected interval is 0.4% lower to 11.0% higher, the normal one 0.2% to 10.0% higher; the conclusion changes: by the corrected one, not settled.",
    );
    const back = effectWith([-0.004, 0.05, 0.11], [0.002, 0.05, 0.1], "skew-corrected");
    expect(otherIntervalSentence(back, plan, [back])).toBe(
      'The corrected interval counts, 0.4% lower to 11.0% higher, the normal one is 0.2% to 10.0% higher; the conclusion changes: by that one, adopt "calendar".',
    );
  });

  it("says that the conclusion stays where another zone decides nothing", () => {
    const information = planOf({ metrics: [fare, FARE] });
    const primary = effectWith([0.02, 0.06, 0.1], null);
    const other = {
      ...effectWith([0.002, 0.05, 0.1], [-0.004, 0.05, 0.11]),
      metric: FARE.name,
      role: "secondary" as const,
    };
    expect(otherIntervalSentence(other, information, [primary, other])).toMatch(/; the conclusion stays\.$/);
  });

  it("speaks of no conclusion where there is none, and is not there without another interval", () => {
    const effect = effectWith([0.02, 0.06, 0.1], [0.025, 0.06, 0.11]);
    expect(otherIntervalSentence(effect, plan, null)).toMatch(/10\.0% higher\.$/);
    expect(otherIntervalSentence(effectWith([0.02, 0.06, 0.1], null), plan, [])).toBeNull();
  });

  it("tells of groups of one size that are not corrected", () => {
    const effect = effectWith([0.02, 0.06, 0.1], [0.02, 0.06, 0.1]);
    const cancelled = {
      ...effect,
      normality: effect.normality && { ...effect.normality, corrected: { low: 0, high: 0, p: 1, skew: 0 } },
    };
    expect(otherIntervalSentence(cancelled, plan, [cancelled])).toBe(
      "The corrected interval is 2.0% to 10.0% higher, the same as the normal one to these digits; the conclusion stays. Groups of one size are not corrected: their skewness cancels.",
    );
  });
});

describe("the rule without words", () => {
  it("is the conclusion's", () => {
    const plan = planOf({ metrics: [{ ...FARE, role: "primary" }] });
    const effect = (ends: readonly [number, number, number]) =>
      effectOf({ ...FARE, role: "primary" }, contrastOf(100, ends));
    expect(decided(plan, [effect([0.01, 0.02, 0.03])])).toMatchObject({ decision: "adopt", variant: "calendar" });
    expect(decided(plan, [effect([-0.03, -0.02, -0.01])])).toMatchObject({ decision: "keep-control", variant: null });
    expect(decided(plan, [effect([-0.03, 0, 0.01])])).toMatchObject({ decision: "not-settled", variant: null });
  });
});
