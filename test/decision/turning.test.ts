import { describe, expect, it } from "vitest";
import { whatWouldChange } from "../../src/decision/turning.ts";
import type { Effect } from "../../src/decision/types.ts";
import type { Reduction } from "../../src/engine/types.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import type { Contrast } from "../../src/stats/types.ts";
import { planOf, reductionOf, variantsOf } from "../checks/make.ts";
import {
  BOOKED,
  CONTACTS,
  contrastOf,
  type Ends,
  effectOf,
  FARE,
  FERRY,
  unmeasurable,
  withoutRelative,
} from "./make.ts";
import { BROKEN, NEVER_USED } from "./words-never-used.ts";

const FOLLOWED: Plan = { ...FERRY, followUp: { days: 7, incomplete: "exclude" } };

function answers(effect: Effect, plan: Plan = FERRY, reduction: Reduction = reductionOf(plan)) {
  return Object.fromEntries(whatWouldChange(effect, plan, reduction).map(({ what, answer }) => [what, answer]));
}

const shown = "Largest worthwhile effect that would still count as shown";
const ruledOut = "Smallest worthwhile effect that is ruled out";
const tightest = "Tightest limit that would still be kept";
const thousand = 'For every 1,000 visitors with "calendar" instead of "list"';

describe("what would change the conclusion", () => {
  // PAGES, page one: adopt and not settled
  it("is, of what decides, the worthwhile effect at which it would stand otherwise", () => {
    const gain = answers(effectOf(BOOKED, contrastOf(0.12, [0.065, 0.1, 0.137])));
    expect([gain[shown], gain[ruledOut]]).toEqual(["anything short of 6.5% more", "anything beyond 13.7% more"]);
    const open = answers(effectOf(BOOKED, contrastOf(0.12, [-0.026, 0.025, 0.078])));
    expect([open[shown], open[ruledOut]]).toEqual([
      "none, for the interval does not exclude 0",
      "anything beyond 7.8% more",
    ]);
    const loss = answers(effectOf(BOOKED, contrastOf(0.12, [-0.094, -0.061, -0.027])));
    expect(loss[ruledOut]).toBe("any gain");
  });

  it("is, of what must not get worse, the tightest limit that would be kept", () => {
    expect(answers(effectOf(CONTACTS, contrastOf(0.08, [-0.06, -0.012, 0.038])))[tightest]).toBe(
      "any limit beyond 3.8% more",
    );
    expect(answers(effectOf(CONTACTS, contrastOf(0.08, [-0.09, -0.05, -0.01])))[tightest]).toBe(
      "any, for the interval holds no harm",
    );
    expect(answers(effectOf(CONTACTS, contrastOf(0.08, [-0.09, -0.05, null])))[tightest]).toBe(
      "none: the interval has no end on the worse side",
    );
  });

  it("is how those not counted would have to be, in the words of the measure", () => {
    const reduction = reductionOf(FOLLOWED, { enrolled: [10_000, 10_000], ended: { "follow-up": [900, 1_000] } });
    const of = (metric: Metric, contrast: Contrast) =>
      answers(effectOf(metric, { ...contrast, variant: { ...contrast.variant, units: 9_000 } }), FOLLOWED, reduction)[
        "What visitors not counted would have to be for this to turn"
      ];
    // 0.12 x 0.065 = 0.0078 below, times (9,000 + 1,000) / 1,000: 13.2 - 7.8 = 5.4 of 100
    expect(of(BOOKED, contrastOf(0.12, [0.065, 0.1, 0.137]))).toBe(
      'the 1,000 visitors with "calendar" not followed to the end would have to stand at about 5.4 instead of 13.2 of 100 visitors (those with "list" like its counted ones, the interval as wide as it is)',
    );
    // the limit of 5% is 1.2% of 0.08 away: 0.0079 + 0.00096 x 10 = 0.01756
    expect(of(CONTACTS, contrastOf(0.08, [-0.06, -0.012, 0.038]))).toContain(
      "stand at about 8.9 instead of 7.9 per 100 visitors",
    );
    expect(of(BOOKED, contrastOf(0.12, [0.2, 0.25, 0.3]))).toBe(
      'nothing they could be: the 1,000 visitors with "calendar" not followed to the end cannot turn it (those with "list" like its counted ones, the interval as wide as it is)',
    );
  });

  it("comes with the absolute amounts: for every 1,000, and in a month where the plan forecasts one", () => {
    const effect = effectOf(BOOKED, contrastOf(0.12, [0.065, 0.1, 0.137]));
    expect(answers(effect)).not.toHaveProperty('In a month of 30,000 visitors, all with "calendar" instead of "list"');
    const planned = answers(effect, { ...FERRY, forecast: { unitsPerMonth: 30_000 } });
    // PAGES: about 12 more (8 to 16); 30 times that
    expect(planned[thousand]).toBe("12 more (95% interval: 8 to 16 more)");
    expect(planned['In a month of 30,000 visitors, all with "calendar" instead of "list"']).toBe(
      "360 more (95% interval: 230 to 490 more)",
    );
    expect(answers(effectOf(FARE, contrastOf(96.4, [0.025, 0.078, 0.134])))[thousand]).toBe(
      "7,500 kr more (95% interval: 2,400 to 12,900 kr more)",
    );
    expect(answers(effectOf(FARE, contrastOf(96.4, [-0.134, -0.078, 0.025])))[thousand]).toBe(
      "7,500 kr less (95% interval: 12,900 kr less to 2,400 kr more)",
    );
  });

  it("has no amount of a ratio, which is not of units", () => {
    const ratio: Metric = { ...FARE, name: "Bookings per search", summary: "ratio-of-totals", per: FARE.of };
    const plan = planOf({ metrics: [ratio] });
    expect(Object.keys(answers(effectOf(ratio, contrastOf(0.2, [0.01, 0.02, 0.03])), plan))).toEqual([]);
  });

  it("takes a mean with many zeros apart, and says that the second part is no randomised comparison", () => {
    const base = contrastOf(96.4, [0.025, 0.078, 0.134]);
    const arm = (total: number) => ({ ...base.control, units: 50_000, total });
    const effect = effectOf(FARE, { ...base, control: arm(4_820_000), variant: arm(5_195_000) });
    const reduction = reductionOf(FERRY);
    const withSome = (notZero: readonly number[]): Reduction => ({
      ...reduction,
      metrics: reduction.metrics.map((cells) => ({ ...cells, notZero })),
    });
    // 6,000 and 6,600 of 50,000; 4,820,000 / 6,000 and 5,195,000 / 6,600
    const apart = "Share with any, and mean of those that have any";
    expect(answers(effect, FERRY, withSome([6_000, 6_600]))[apart]).toBe(
      '13.2 of 100 visitors with "calendar" and 12.0 with "list" have any; a visitor that has any has 787.1 kr and 803.3 kr on average. The second is no randomised comparison: the variant can change who is among those.',
    );
    expect(answers(effect, FERRY, withSome([49_000, 48_000]))).not.toHaveProperty(apart);
    expect(answers(effect, FERRY, withSome([0, 6_600]))).not.toHaveProperty(apart);
  });

  it("says nothing broken and no word of ours that readers do not know, whatever was found", () => {
    const ends: readonly Ends[] = [
      [0.065, 0.1, 0.137],
      [-0.094, -0.061, -0.027],
      [-0.026, 0.025, 0.078],
      [0, 0, 0],
      [0, 0.02, 0.04],
      [-0.04, -0.02, 0],
      [null, 0.01, 0.06],
      [0.01, 0.06, null],
      [1e-9, 2e-9, 3e-9],
      [-3000, 1, 3000],
    ];
    const contrasts = [
      ...ends.map((one) => contrastOf(0.12, one)),
      ...ends.map((one) => withoutRelative(contrastOf(0.12, one))),
      unmeasurable(0.12, "few-units"),
      unmeasurable(0.12, "no-units"),
    ];
    const plan: Plan = { ...FOLLOWED, forecast: { unitsPerMonth: 7 }, variants: variantsOf({ list: 1, calendar: 1 }) };
    const reduction = reductionOf(plan, { ended: { "follow-up": [1, 1] } });
    const some = { ...reduction, metrics: reduction.metrics.map((cells) => ({ ...cells, notZero: [400, 300] })) };
    for (const metric of plan.metrics)
      for (const goodIs of ["higher", "lower"] as const)
        for (const contrast of contrasts) {
          const own = { ...metric, goodIs };
          const with2 = { ...plan, metrics: plan.metrics.map((other) => (other === metric ? own : other)) };
          for (const { what, answer } of whatWouldChange(effectOf(own, contrast), with2, some)) {
            const text = `${what}: ${answer}`;
            expect(text).not.toMatch(BROKEN);
            expect(text.replaceAll(metric.name, "")).not.toMatch(NEVER_USED);
          }
        }
  });
});
