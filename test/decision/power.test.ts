import { describe, expect, it } from "vitest";
import type { Arm } from "../../src/cells/types.ts";
import { effects, nextSentences, nextTest, whyNotSettled } from "../../src/decision/index.ts";
import type { Facts, Reduction } from "../../src/engine/types.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import { metricOf, planOf, reductionOf, variantsOf } from "../checks/make.ts";
import { share } from "./make-arms.ts";

const WORTHWHILE = { kind: "relative", value: 0.05 } as const;
const BOOKED = metricOf({ name: "Booked", role: "primary", worthwhile: WORTHWHILE });
const LEFT = metricOf({
  name: "Left",
  role: "guardrail",
  goodIs: "lower",
  margin: { kind: "absolute", value: 0.004 },
});
const BOOKED_ARMS = [share(2568, 21_400), share(2636, 21_428)];
const LEFT_ARMS = [share(1712, 21_400), share(1735, 21_428)];
const DAYS: Partial<Facts> = {
  firstEnrolledUs: 1_772_407_300_000_000n, // 2 March 2026, 00:21 in Oslo
  lastEnrolledUs: 1_773_615_500_000_000n, // 15 March, 23:58
};

function found(plan: Plan, arms: readonly (readonly Arm[])[], facts: Partial<Facts> = {}) {
  const reduction = reductionOf(plan, { enrolled: [21_400, 21_428], facts });
  return { plan, reduction, effects: effects(plan, arms, reduction) };
}
function booked(changes: Partial<Metric> = {}, decision: Partial<Plan["decision"]> = {}) {
  const plan = planOf({ metrics: [{ ...BOOKED, ...changes }] });
  return found({ ...plan, decision: { ...plan.decision, ...decision } }, [BOOKED_ARMS]);
}
function settle({
  plan,
  effects,
  reduction,
}: {
  plan: Plan;
  effects: ReturnType<typeof found>["effects"];
  reduction: Reduction;
}) {
  const open = { decision: "not-settled", variant: null, sentence: "", reasons: [] } as const;
  return nextSentences(plan, effects, open, reduction).find((text) => text.startsWith("What would settle it"));
}

// R 4.2.2 throughout. With p = x / n, v = p (1 - p) / (n - 1), se = sqrt(v_c + v_t) = 0.0031574901166688,
// k = qnorm(.975) + qnorm(.8) and w = .05 * 2568 / 21400 = .006:
describe("the power of a contrast", () => {
  it("is what its own spread and critical value can find, and the units that the worthwhile effect needs", () => {
    const { power } = booked().effects[0] ?? {};
    expect(power?.detectable).toBeCloseTo(0.0088459776371971, 13); // k * se
    expect(power?.unitsForWorthwhile).toBeCloseTo(93092.987452319, 5); // 42828 * (k * se / w)^2
    // integrate(abs(x) * dnorm(x, w / se)) beyond +-qnorm(.975), over its probability and w / se
    expect(power?.exaggeration).toBeCloseTo(1.44006138827, 9);
  });

  it("does not move with the effect that was observed", () => {
    const other = found(planOf({ metrics: [BOOKED] }), [[share(2568, 21_400), share(21_428 - 2636, 21_428)]]);
    // 2636 of 21428 and its complement have one variance; the estimates lie 0.75 apart
    expect(other.effects[0]?.power.detectable).toBeCloseTo(0.0088459776371971, 13);
    expect(other.effects[0]?.power.unitsForWorthwhile).toBeCloseTo(93092.987452319, 5);
  });

  it("asks, where the worthwhile effect is to be shown, for the units that the expected one needs", () => {
    const shown = (expected: Metric["expected"]) =>
      booked({ expected }, { adoptWhen: "shown-worthwhile" }).effects[0]?.power.unitsForWorthwhile;
    expect(shown({ kind: "relative", value: 0.08 })).toBeCloseTo(258591.631812, 4); // 42828 * (k * se / (.03 * .12))^2
    expect(shown({ kind: "absolute", value: 0.0096 })).toBeCloseTo(258591.631812, 4); // .08 * .12
    for (const expected of [null, WORTHWHILE, { kind: "relative", value: 0.03 } as const])
      expect(shown(expected)).toBeNull();
  });

  it("is of a guardrail the units for its margin, at no true difference", () => {
    const { power } = found(planOf({ metrics: [BOOKED, LEFT] }), [BOOKED_ARMS, LEFT_ARMS]).effects[1] ?? {};
    expect(power?.detectable).toBeCloseTo(0.0073657019146446, 13);
    expect(power?.unitsForWorthwhile).toBeCloseTo(145223.22929841, 5);
    expect(power?.exaggeration).toBeNull();
  });

  it("counts all analysed units of all arms, and Dunnett's critical value, where there are several variants", () => {
    const plan = planOf({ metrics: [BOOKED], variants: variantsOf({ list: 1, calendar: 1, map: 1 }) });
    const reduction = reductionOf(plan, { enrolled: [50_000, 50_000, 50_000] });
    const [first] = effects(plan, [[share(6000), share(6600), share(6600)]], reduction);
    // se = 0.002098477560557, c = 2.21435824463 by mvtnorm (effects.test.ts): (c + qnorm(.8)) se, then 150000 (that / .006)^2
    expect(first?.power.detectable).toBeCloseTo(0.0064129043605, 11);
    expect(first?.power.unitsForWorthwhile).toBeCloseTo(150_000 * (0.0064129043605 / 0.006) ** 2, 3);
  });

  it("has no figure where there is no standard error, no amount, or no level to take a share of", () => {
    const nothing = { detectable: null, unitsForWorthwhile: null, exaggeration: null };
    const plan = planOf({ metrics: [BOOKED] });
    expect(found(plan, [[share(0, 0), share(1, 2)]]).effects[0]?.power).toEqual(nothing);
    expect(booked({ worthwhile: null }).effects[0]?.power).toMatchObject({
      unitsForWorthwhile: null,
      exaggeration: null,
    });
    expect(booked({ role: "secondary", worthwhile: null }).effects[0]?.power.unitsForWorthwhile).toBeNull();
    const none = found(plan, [[share(0, 21_400), share(20, 21_428)]]).effects[0]?.power;
    expect(none?.detectable).toBeGreaterThan(0);
    expect(none).toMatchObject({ unitsForWorthwhile: null, exaggeration: null });
  });
});

describe("the size that a next test needs", () => {
  it("is the largest over primaries and guardrails, with the bound for all together", () => {
    const { plan, effects, reduction } = found(planOf({ metrics: [BOOKED, LEFT] }), [BOOKED_ARMS, LEFT_ARMS], DAYS);
    const { size, unsized } = nextTest(plan, effects, reduction);
    // N = 145223.229298; pnorm(w / (se sqrt(n / N)) - z) = 0.938121379027; 1 - misses; N over (n / 13.98 days)
    expect(size).toMatchObject({ units: 145_224, perArm: 72_612, days: 48 });
    expect(size?.sized.map(({ power }) => power)[0]).toBeCloseTo(0.938121379027, 10);
    expect(size?.sized.map(({ power }) => power)[1]).toBeCloseTo(0.8, 10);
    expect(size?.together).toBeCloseTo(0.738121379027, 10);
    expect(unsized).toEqual([]);
  });

  it("is told with what it finds, and how long it takes at this pace", () => {
    expect(settle(found(planOf({ metrics: [BOOKED] }), [BOOKED_ARMS], DAYS))).toBe(
      "What would settle it: a new test with 46,600 visitors in each variant, 5 weeks of enrolment at this pace. It finds a gain of 5% in Booked in 4 of 5 cases.",
    );
    expect(settle(found(planOf({ metrics: [BOOKED, LEFT] }), [BOOKED_ARMS, LEFT_ARMS]))).toBe(
      "What would settle it: a new test with 72,700 visitors in each variant. It finds a gain of 5% in Booked in 93 of 100 cases and, where nothing changes, Left within its limit of 0.4 percentage points higher in 4 of 5 cases; all of it together in at least 73 of 100.",
    );
  });

  it("is told without single chances where the questions are many", () => {
    const metrics = ["A", "B", "C", "D"].map((name) => ({ ...BOOKED, name }));
    expect(
      settle(
        found(
          planOf({ metrics }),
          metrics.map(() => BOOKED_ARMS),
        ),
      ),
    ).toContain(
      // 1 - 4 x 0.2
      "It finds each of these in 4 of 5 cases or more: a gain of 5% in A, a gain of 5% in B, a gain of 5% in C and a gain of 5% in D; all of it together in at least 1 of 5.",
    );
  });

  it("is told for a guardrail alone, where the primary has no amount", () => {
    const plan = planOf({ metrics: [{ ...BOOKED, worthwhile: null }, LEFT] });
    expect(settle(found(plan, [BOOKED_ARMS, LEFT_ARMS]))).toContain(
      "It finds, where nothing changes, Left within its limit of 0.4 percentage points higher in 4 of 5 cases.",
    );
  });

  it("is told for all variants together where they are not of one size", () => {
    const plan = planOf({ metrics: [BOOKED], variants: variantsOf({ list: 2, calendar: 1 }) });
    expect(settle(found(plan, [BOOKED_ARMS]))).toContain("with 93,100 visitors in all, shared out as in this test.");
  });

  it("is told for what the plan expects where the worthwhile effect is to be shown; without that no size helps", () => {
    const shown = { adoptWhen: "shown-worthwhile" } as const;
    expect(settle(booked({ expected: { kind: "relative", value: 0.08 } }, shown))).toContain(
      "with 130,000 visitors in each variant. It finds a gain beyond 5% in Booked, if it is the 8% that the plan expects, in 4 of 5 cases.",
    );
    expect(settle(booked({}, shown))).toBe(
      "What would settle it: a new test with more visitors. For Booked no size helps: the plan adopts on a gain proven to go beyond 5% and expects none larger, and a gain of just 5% is proven so in 2.5% of tests at most, however large they are.",
    );
  });

  it("is not told where the plan states no amount, or the data give none", () => {
    expect(settle(booked({ worthwhile: null }))).toBe(
      "What would settle it: a new test with more visitors. The plan states no amount to size it for.",
    );
    expect(settle(found(planOf({ metrics: [BOOKED] }), [[share(0, 21_400), share(20, 21_428)]]))).toBe(
      "What would settle it: a new test with more visitors. For Booked these data tell no size.",
    );
  });

  it("says so where this test had that size already", () => {
    expect(settle(booked({ worthwhile: { kind: "relative", value: 0.2 } }))).toContain(
      "That is no more than were counted here: an effect near the limit can stay unsettled in a test of any size.",
    );
  });
});

describe("why it is not settled", () => {
  const planned = (plannedUnits: number): Plan => {
    const plan = planOf({ plannedUnits });
    const [fromUs, beforeUs] = [1_772_406_000_000_000n, 1_773_615_600_000_000n]; // 14 days of March 2026 in Oslo
    return { ...plan, enrolment: { ...plan.enrolment, fromUs, beforeUs } };
  };
  const why = (plan: Plan, facts: Partial<Facts> = DAYS) =>
    whyNotSettled(plan, reductionOf(plan, { enrolled: [21_400, 21_428], facts }));

  it("is the pace, where that was slower than planned", () => {
    // 42828 over 13.98 days is 3062.7; 100000 / 14 is 7142.9
    expect(why(planned(100_000))).toBe(
      "Why: 42,828 visitors were counted; the plan asked for 100,000. They enrolled at 3,060 a day instead of 7,140.",
    );
  });

  it("is not the pace where that is not known, or was as planned", () => {
    const alone = "Why: 42,828 visitors were counted; the plan asked for 43,000.";
    expect(why(planned(43_000))).toBe(alone);
    expect(why(planned(100_000), {})).not.toContain("a day");
    expect(why(planOf({ plannedUnits: 100_000 }))).not.toContain("a day");
  });
});
