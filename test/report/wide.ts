import { placed } from "../../src/decision/index.ts";
import type { Metric, Plan, Variant } from "../../src/plan/types.ts";
import { adopt, effectOf, inputs } from "./cases.ts";
import { handContrast, shareArm } from "./contrasts.ts";
import { booked, contacts, fare, farePlan, list } from "./plans.ts";

/** Names as teams give them: one long word, a sentence, from right to left, without spaces, in several scripts. */
const NAMES = [
  "booking_completed_with_all_supplements_and_insurance_v2_final_do_not_use",
  "Bookings that were neither cancelled, nor moved to another day, nor paid with a voucher, within the first week",
  "\u05d4\u05d6\u05de\u05e0\u05d5\u05ea \u05e9\u05d4\u05d5\u05e9\u05dc\u05de\u05d5",
  "\u4e88\u7d04\u304c\u5b8c\u4e86\u3057\u305f\u8a2a\u554f\u8005\u306e\u5272\u5408\u3068\u305d\u306e\u6599\u91d1\u306e\u5408\u8a08",
  "\u0627\u0644\u062d\u062c\u0648\u0632\u0627\u062a (2)",
] as const;

const variants: readonly Variant[] = [
  list,
  { name: "calendar", what: "a month of fares at a glance", isControl: false, allocation: 1 },
  { name: "\u5730\u56f3", what: "\u6e2f\u306e\u5730\u56f3", isControl: false, allocation: 1 },
  { name: "\u05de\u05e4\u05d4 2", what: null, isControl: false, allocation: 1 },
  { name: "calendar_with_map_and_all_departures_of_the_day", what: null, isControl: false, allocation: 1 },
];

function metricAt(i: number): Metric {
  const name = `${NAMES[i % NAMES.length]} ${i + 1}`;
  if (i < 3) return { ...booked, name };
  if (i < 8) return { ...contacts, name };
  return { ...fare, name, cap: null };
}

const plan: Plan = { ...farePlan, variants, metrics: Array.from({ length: 40 }, (_, i) => metricAt(i)) };

function effectAt(metric: Metric, i: number, variant: string, v: number) {
  const n = 20_000;
  const gain = 1 + 0.02 * v + 0.004 * (i % 7);
  const [control, treated] =
    metric.summary === "proportion"
      ? [shareArm(n, 0.12), shareArm(n, 0.12 * gain)]
      : [
          { units: n, mean: 96.4, sd: 210 },
          { units: n, mean: 96.4 * gain, sd: 215 },
        ];
  const contrast = handContrast(control, treated);
  return { ...effectOf(metric, variant, contrast, "not-settled"), ...placed(metric, contrast) };
}

/** Forty measures and five variants. */
export const wide = inputs({
  plan,
  flow: {
    analysed: [20_060, 20_090, 20_011, 20_140, 19_870],
    byFilter: [[50, 51, 49, 49, 60]],
    followUp: [350, 353, 352, 355, 340],
    notEnrolled: 2_180,
    outside: [102, 104, 101, 105, 90],
    unknown: 10,
  },
  effects: plan.metrics.flatMap((metric, i) => variants.slice(1).map(({ name }, v) => effectAt(metric, i, name, v))),
  conclusion: { ...adopt.conclusion, variant: "calendar" },
});
