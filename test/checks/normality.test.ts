import { describe, expect, it } from "vitest";
import { type ContrastFigures, checks } from "../../src/checks/index.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import type { LargestShare, Method, Normality } from "../../src/stats/index.ts";
import { metricOf, planOf, reductionOf, variantsOf } from "./make.ts";

const FARE = metricOf({ name: "Fare", role: "primary", summary: "mean" });
const BOOKED = metricOf({ name: "Booked" });

interface Shape {
  /** Tails in percent. */
  readonly own?: readonly [number, number];
  readonly pooled?: readonly [number, number];
  readonly level?: Normality["tails"]["level"];
  readonly shapesDiffer?: boolean;
  readonly shares?: readonly [LargestShare | null, LargestShare | null] | null;
  readonly unitsForTails?: number | null;
}

/** What stats finds of two arms, by hand: the check judges by the level and words the tails. */
function normalityOf({
  own = [2.5, 2.5],
  pooled = own,
  level = "near",
  shapesDiffer = false,
  ...more
}: Shape): Normality {
  const pair = ([lower, upper]: readonly [number, number]) => ({ lowerTail: lower / 100, upperTail: upper / 100 });
  const shares = more.shares === undefined ? null : more.shares;
  const expansion = { skew: 0, kurtosis: 0, freedom: 0, lean: 0, shift: 0 };
  return {
    tails: {
      nominal: 0.025,
      skew: 0.1,
      pooled: pair(pooled),
      own: pair(own),
      reported: pair(own),
      level,
      shapesDiffer,
      expansions: { pooled: expansion, own: expansion },
    },
    corrected: { low: 0, high: 1, p: 0.1, skew: 0.1 },
    unitsForTails: more.unitsForTails ?? null,
    unitsByRule: { kohavi: 10, cochran: 1 },
    largest: shares === null ? null : { control: shares[0], variant: shares[1] },
  };
}

const contrastOf = (shape: Shape | null, over: Partial<ContrastFigures> = {}): ContrastFigures => ({
  metric: "Fare",
  variant: "calendar",
  control: "list",
  method: "normal",
  normality: shape === null ? null : normalityOf(shape),
  ...over,
});

const planOfMetrics = (...metrics: Metric[]): Plan => planOf({ metrics });
const find = (id: string, plan: Plan, contrasts: readonly ContrastFigures[]) =>
  checks(plan, reductionOf(plan), contrasts).find((check) => check.id === id);

describe("the check of the normal approximation", () => {
  it("passes where both tails are near", () => {
    expect(find("normality", planOfMetrics(FARE), [contrastOf({ own: [2.9, 2.1], unitsForTails: 800 })])).toMatchObject(
      {
        result: "pass",
        strong: false,
        sentence: "Fare: the nominal 2.5% tails are about 2.9% and 2.1%, near enough.",
        remedy: "",
        parts: [{ about: "Fare", figures: { variant: "calendar", nominal: 0.025, unitsForTails: 800 } }],
      },
    );
  });

  it("is a caution where one is off by more than a fifth, a strong one by more than half, and never fails", () => {
    const caution = find("normality", planOfMetrics(FARE), [contrastOf({ own: [1.6, 3.4], level: "caution" })]);
    expect(caution).toMatchObject({
      result: "caution",
      strong: false,
      sentence:
        "Fare: the nominal 2.5% tails are about 1.6% (the interval wholly below the truth) and 3.4% (wholly above), off by more than a fifth.",
      remedy:
        "Read the corrected interval in section 5 beside it. In the plan of a next test, cap its values (cap: {quantile: 0.999}) or let the corrected interval decide (interval: skew-corrected).",
    });
    const strong = find("normality", planOfMetrics(FARE), [contrastOf({ own: [8.2, 0.3], level: "strong" })]);
    expect(strong).toMatchObject({ result: "caution", strong: true });
    expect(strong?.sentence).toMatch(/about 8\.2% .* and 0\.30% .*, off by more than half\.$/);
  });

  it("does not say about how much where it says more than how much", () => {
    const far = find("normality", planOfMetrics(FARE), [contrastOf({ own: [35, 0.001], level: "strong" })]);
    expect(far?.sentence).toBe(
      "Fare: the nominal 2.5% tails are over 30% (the interval wholly below the truth) and next to 0% (wholly above), off by more than half.",
    );
  });

  it("is a caution where the arms' shapes differ, with a cap as the remedy", () => {
    const shapes = { own: [2.7, 2.3], pooled: [3.4, 1.7], shapesDiffer: true } as const;
    expect(find("normality", planOfMetrics(FARE), [contrastOf(shapes)])).toMatchObject({
      result: "caution",
      strong: false,
      sentence:
        "Fare: the nominal 2.5% tails are about 2.7% (the interval wholly below the truth) and 2.3% (wholly above). The groups' values are of different shapes: by each group's own the tails are 2.7% and 2.3%, by one for both 3.4% and 1.7%.",
      remedy: "In the plan of a next test, cap its values (cap: {quantile: 0.999}).",
    });
  });

  it("speaks of the worst variant of each metric, and of one metric a part", () => {
    const plan = planOf({ metrics: [FARE, BOOKED], variants: variantsOf({ list: 1, calendar: 1, map: 1 }) });
    const check = find("normality", plan, [
      contrastOf({ own: [2.5, 2.6] }),
      contrastOf({ own: [1.6, 3.6], level: "caution" }, { variant: "map" }),
      contrastOf({ own: [2.4, 2.6] }, { metric: "Booked" }),
      contrastOf({ own: [2.6, 2.4] }, { metric: "Booked", variant: "map" }),
    ]);
    expect(check?.sentence).toMatch(/^Fare with "map": /);
    expect(check?.parts.map(({ about, result }) => [about, result])).toEqual([
      ["Fare", "caution"],
      ["Booked", "pass"],
    ]);
  });

  it("passes where the score interval counts, and says which counts where the corrected one does", () => {
    const of = (method: Method) => [contrastOf({ own: [0, 12], level: "strong" }, { metric: "Booked", method })];
    const score = find("normality", planOfMetrics(BOOKED), of("score"));
    expect(score?.result).toBe("pass");
    expect(score?.sentence).toBe(
      "Booked: with so few events the score interval counts, which does not lean on the normal curve.",
    );
    const corrected = find("normality", planOfMetrics(BOOKED), of("skew-corrected"));
    expect(corrected?.sentence).toMatch(/are next to 0% .* The corrected interval counts here\.$/);
    expect(corrected?.remedy).toBe("In the plan of a next test, ask for more visitors.");
  });

  it("asks for a lower cap where there is one, and for none of a share", () => {
    const capped = metricOf({ ...FARE, cap: { kind: "at", at: "500" } });
    const bad = { own: [1, 5], level: "strong" } as const;
    expect(find("normality", planOfMetrics(capped), [contrastOf(bad)])?.remedy).toContain("cap its values lower or");
    const share = find("normality", planOfMetrics(BOOKED), [contrastOf(bad, { metric: "Booked" })])?.remedy;
    expect(share).not.toContain("cap");
    expect(share).toContain("interval: skew-corrected");
  });

  it("is not there where nothing is known, as of quantiles", () => {
    expect(find("normality", planOfMetrics(FARE), [contrastOf(null)])).toBeUndefined();
    expect(find("normality", planOfMetrics(FARE), [])).toBeUndefined();
  });
});

describe("the check of one unit", () => {
  const share = (ofSquares: number, level: LargestShare["level"]): LargestShare => ({ ofSquares, ofCubes: 1, level });

  it("passes, cautions and cautions strongly by what one unit holds", () => {
    const of = (one: LargestShare) =>
      find("one-unit", planOfMetrics(FARE), [contrastOf({ shares: [share(0.01, "near"), one] })]);
    expect(of(share(0.02, "near"))).toMatchObject({
      result: "pass",
      sentence: "Fare: no visitor holds more than 2.0% of its group's spread.",
    });
    expect(of(share(0.08, "caution"))).toMatchObject({
      result: "caution",
      strong: false,
      sentence:
        'Fare: one visitor with "calendar" holds 8.0% of its group\'s spread (of the sum of squares about the mean).',
    });
    expect(of(share(0.31, "strong"))).toMatchObject({ result: "caution", strong: true });
    expect(of(share(0.31, "strong"))?.sentence).toMatch(/, so no interval for it can be relied on\.$/);
    expect(of(share(0.31, "strong"))?.remedy).toContain("cap: {quantile: 0.999}");
  });

  it("looks at every arm of every mean and ratio, by what is judged worse and not by the larger share", () => {
    const plan = planOf({ metrics: [FARE, BOOKED], variants: variantsOf({ list: 1, calendar: 1, map: 1 }) });
    const check = find("one-unit", plan, [
      contrastOf({ shares: [share(0.3, "near"), null] }),
      contrastOf({ shares: [share(0.3, "near"), share(0.07, "caution")] }, { variant: "map" }),
      contrastOf({ shares: null }, { metric: "Booked" }),
    ]);
    expect(check?.parts).toHaveLength(1);
    expect(check).toMatchObject({ result: "caution", parts: [{ figures: { variant: "map", share: 0.07 } }] });
  });
});
