import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { hingeOf, tippingPoint } from "../../src/decision/tipping.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import type { Contrast } from "../../src/stats/types.ts";
import { metricOf, planOf, reductionOf } from "../checks/make.ts";
import { contrastOf, type Ends, effectOf } from "./make.ts";

const FOLLOWED = { days: 7, incomplete: "exclude" } as const;
const fare = (changes: Partial<Metric>) =>
  metricOf({
    name: "Fare",
    role: "primary",
    summary: "mean",
    of: { event: "booking", where: [], aggregate: { kind: "sum", column: "fare" } },
    worthwhile: { kind: "absolute", value: 5 },
    ...changes,
  });
const guardrail = (changes: Partial<Metric>) =>
  fare({ role: "guardrail", worthwhile: null, margin: { kind: "absolute", value: 5 }, ...changes });

/** A contrast about a control of 100 with the given absolute interval, of n units in the variant. */
function about100([low, estimate, high]: Ends, n: number): Contrast {
  const found = contrastOf(100, [low === null ? null : low / 100, estimate / 100, high === null ? null : high / 100]);
  return { ...found, variant: { ...found.variant, units: n } };
}

function found(metric: Metric, contrast: Contrast, late: number, decision: Partial<Plan["decision"]> = {}) {
  const base = planOf({ metrics: [metric], followUp: FOLLOWED });
  const plan = { ...base, decision: { ...base.decision, ...decision } };
  const reduction = reductionOf(plan, { enrolled: [5_000, 5_000], ended: { "follow-up": [0, late] } });
  const effect = effectOf(metric, contrast);
  return { hinge: hingeOf(effect, plan), tipping: tippingPoint(effect, plan, reduction), zone: effect.zone };
}

describe("the tipping point of those not counted", () => {
  // Every zone that is settled, with the end and the limit that it hangs on (METHODS 2).
  const CASES: readonly (readonly [
    what: string,
    metric: Metric,
    ends: Ends,
    zone: string,
    end: 0 | 2,
    limit: number,
  ])[] = [
    ["a gain that is proven and worthwhile", fare({}), [6, 8, 10], "worthwhile", 0, 0],
    ["a gain that is proven", fare({}), [2, 6, 10], "better", 0, 0],
    ["a loss", fare({}), [-9, -6, -3], "worse", 2, 0],
    ["a gain too small", fare({}), [1, 2, 3], "too-small", 2, 5],
    ["no worthwhile gain", fare({}), [-2, 1, 4], "no-worthwhile-gain", 2, 5],
    ["a gain where lower is better", fare({ goodIs: "lower" }), [-10, -6, -2], "better", 2, 0],
    ["a loss where lower is better", fare({ goodIs: "lower" }), [3, 6, 9], "worse", 0, 0],
    ["a limit that is kept", guardrail({}), [-3, 1, 5], "within", 0, -5],
    ["a limit that is passed", guardrail({}), [-12, -9, -6], "beyond", 2, -5],
    ["a limit upwards that is kept", guardrail({ goodIs: "lower" }), [-5, -1, 3], "within", 2, 5],
  ];

  it.each(CASES)("of %s carries that end of the interval exactly to its limit", (_, metric, ends, zone, end, limit) => {
    fc.assert(
      fc.property(fc.integer({ min: 2, max: 4_000 }), fc.integer({ min: 1, max: 900 }), (n, late) => {
        const result = found(metric, about100(ends, n), late);
        expect(result.zone).toBe(zone);
        const { needed = Number.NaN, counted = Number.NaN, units } = result.tipping ?? {};
        expect(units).toBe(late);
        // The mean of all enrolled, one by one: n as they are and the others at that level.
        const moved = (n * counted + late * needed) / (n + late) - counted;
        expect((ends[end] ?? Number.NaN) + moved).toBeCloseTo(limit, 9);
      }),
    );
  });

  it("goes by the worthwhile effect where the plan adopts only what is proven to reach it", () => {
    const only = { adoptWhen: "shown-worthwhile" } as const;
    expect(found(fare({}), about100([6, 8, 10], 1_000), 50, only).hinge).toEqual({
      end: "low",
      limit: 5,
      distance: expect.closeTo(1, 9),
    });
    expect(found(fare({}), about100([2, 6, 10], 1_000), 50, only).hinge).toBeNull();
  });

  it("counts a relative amount as that share of the control's level", () => {
    const relative = fare({ worthwhile: { kind: "relative", value: 0.05 } });
    expect(found(relative, about100([6, 8, 10], 1_000), 50).hinge?.distance).toBeCloseTo(6, 9);
    expect(found(relative, about100([1, 2, 3], 1_000), 50).hinge?.distance).toBeCloseTo(2, 9);
  });

  it("is none where nothing is settled, where it is for information, and where all were counted", () => {
    expect(found(fare({}), about100([-2, 3, 8], 1_000), 50).tipping).toBeNull();
    expect(found(fare({ role: "secondary", worthwhile: null }), about100([2, 6, 10], 1_000), 50).tipping).toBeNull();
    expect(found(fare({}), about100([2, 6, 10], 1_000), 0).tipping).toBeNull();
  });

  it("says when no share and no amount above 0 would do", () => {
    const booked = metricOf({ name: "Booked", role: "primary" });
    const share = contrastOf(0.12, [0.05, 0.1, 0.15]);
    // 0.12 x 0.05 = 0.006 of 1,000 + m: all of m without a booking do it from 0.006 (1000 + m) / m <= 0.132 on, m >= 48.
    const at = (late: number) => {
      const result = found(booked, { ...share, variant: { ...share.variant, units: 1_000 } }, late);
      return result.tipping?.isPossible;
    };
    expect([at(47), at(48)]).toEqual([false, true]);
    const below = about100([2, 6, 10], 1_000);
    expect(found(fare({}), below, 10).tipping?.isPossible).toBe(false);
    const debts = { ...below, control: { ...below.control, smallest: -3 } };
    expect(found(fare({}), debts, 10).tipping?.isPossible).toBe(true);
  });

  it("takes in those seen with two variants and those without a value, where they are left out", () => {
    const metric = fare({ withoutRows: "leave-out" });
    const plan = planOf({
      metrics: [metric],
      followUp: FOLLOWED,
      enrolment: { ...planOf().enrolment, inTwoVariants: "exclude" },
    });
    const reduction = reductionOf(plan, {
      ended: { switched: [3, 4], "follow-up": [20, 30] },
      leftOut: { Fare: [100, 200] },
    });
    const { notCounted, units } = tippingPoint(effectOf(metric, about100([2, 6, 10], 766)), plan, reduction) ?? {};
    expect(notCounted).toEqual({ lateFollowUp: 30, inTwoVariants: 4, withoutValue: 200 });
    expect(units).toBe(234);
  });
});
