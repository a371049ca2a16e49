import type { Accrual, DaysSince, Subgroup, SubgroupLevel } from "../../src/decision/index.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import { adopt } from "./cases.ts";
import { handContrast, shareArm } from "./contrasts.ts";
import { reductionOf } from "./reductions.ts";

const FIRST_DAY = 20_514; // 2 March 2026, a Monday

/** An effect that settles over six days; with the ends of a band twice as wide as the interval. */
export function accrualOf(metric: string, estimates: readonly number[]): Accrual {
  return {
    metric,
    variant: "calendar",
    band: { alpha: 0.05, planned: 100_000, isPlanned: true },
    days: estimates.map((estimate, i) => {
      const half = 0.01 / Math.sqrt(i + 1);
      const [low, high] = [estimate - half, estimate + half];
      return {
        day: FIRST_DAY + i,
        units: 16_000 * (i + 1),
        estimate,
        low,
        high,
        bandLow: low - half,
        bandHigh: high + half,
      };
    }),
  };
}

function levelOf(level: SubgroupLevel["level"], n: number, control: number, variant: number): SubgroupLevel {
  return {
    level,
    units: { control: n, variant: n + 3 },
    contrast: n < 2 ? { absent: "few-units" } : handContrast(shareArm(n, control), shareArm(n + 3, variant)),
    pAdjusted: n < 2 ? null : 0.2,
    standing: n < 50 ? "too-few" : variant < control ? "against" : "not-against",
  };
}

const levels: readonly SubgroupLevel[] = [
  levelOf({ kind: "value", text: "NO" }, 30_000, 0.12, 0.135),
  levelOf({ kind: "value", text: "other" }, 9_000, 0.13, 0.1),
  levelOf({ kind: "value", text: "IS" }, 31, 0.12, 0.14),
  levelOf({ kind: "rest", levels: 4 }, 700, 0.11, 0.12),
  levelOf({ kind: "missing" }, 1, 0, 0),
];

const byCountry = (metric: string): Subgroup => ({
  column: "country",
  metric,
  variant: "calendar",
  levels,
  heterogeneity: { q: 21.4, df: 2, p: 0.00002 },
});

const days: DaysSince = {
  metric: "Booked",
  variant: "calendar",
  units: { control: 49_400, variant: 49_500 },
  days: [0.09, 0.04, 0.02].map((share) => handContrast(shareArm(49_400, share), shareArm(49_500, share * 1.1))),
  trend: { estimate: -0.0035, standardError: 0.0009, low: -0.0053, high: -0.0017, p: 0.0001 },
};

const reduction = {
  ...adopt.reduction,
  facts: {
    ...adopt.reduction.facts,
    analysedByDay: [0, 1, 2, 3, 4, 7].map((i) => ({ day: FIRST_DAY + i, units: [8_000, 8_000] })),
  },
};

/** The case "adopt" with all that days and levels tell of it, and with something that was asked afterwards. */
export const grouped: ReportInputs = {
  ...adopt,
  reduction,
  accruals: [
    accrualOf("Booked", [0.02, 0.016, 0.013, 0.012, 0.012, 0.012]),
    { ...accrualOf("Support contacts", []), band: { alpha: 0.05, planned: 100_301, isPlanned: false } },
    accrualOf("Fare per visitor", [9, 8, 7.5]),
  ],
  daysSince: [days],
  subgroups: [byCountry("Booked"), { ...byCountry("Fare per visitor"), heterogeneity: null }],
  afterwards: {
    subgroups: [{ ...byCountry("Booked"), column: "platform" }],
    metrics: {
      plan: adopt.plan,
      reduction: reductionOf(adopt.plan, {
        analysed: [50_120, 50_181],
        byFilter: [],
        followUp: [0, 0],
        notEnrolled: 0,
        outside: [0, 0],
        unknown: 0,
      }),
      effects: adopt.effects.slice(2),
    },
  },
};
