import { conclusion, effects } from "../../src/decision/index.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import { quantileArms } from "../stats/quantile-arm.ts";
import { adopt } from "./cases.ts";
import { booked, farePlan } from "./plans.ts";
import { reductionOf } from "./reductions.ts";

const wait: Metric = {
  ...booked,
  name: "Wait for the fares",
  role: "primary",
  summary: "quantile",
  quantile: "0.5",
  of: { event: "search_opened", where: [], aggregate: { kind: "max", column: "seconds" } },
  unitOfMeasure: "s",
  goodIs: "lower",
  worthwhile: { kind: "absolute", value: 0.5 },
  withoutRows: "leave-out",
};
const guard: Metric = {
  ...wait,
  name: "Longest waits",
  role: "guardrail",
  quantile: "0.9",
  worthwhile: null,
  margin: { kind: "relative", value: 0.05 },
};
const pages: Metric = { ...guard, name: "Pages", role: "secondary", margin: null, unitOfMeasure: null };
const rare: Metric = { ...pages, name: "Rarest waits", quantile: "0.999", unitOfMeasure: "s" };

export const quantilePlan: Plan = { ...farePlan, metrics: [wait, guard, pages, rare] };

/** n waits from 1.00 s on, a hundredth apart. */
const waits = (n: number, from = 1) => Array.from({ length: n }, (_, i) => (Math.round(from * 100) + i) / 100);
const same = (n: number, x: number) => Array.from({ length: n }, () => x);

const values: readonly (readonly [string, readonly (readonly number[])[]])[] = [
  ["0.5", [waits(400), waits(420, 0.1)]],
  ["0.9", [waits(400), waits(420, 0.1)]],
  ["0.9", [same(400, 3), same(420, 4)]],
  // Of 4,000 the 4,000th is the upper end, of 420 the 421st would be.
  ["0.999", [waits(4000), waits(420, 0.1)]],
];
const arms = values.map(([q, own]) => quantileArms(q, own));
const reduction = reductionOf(quantilePlan, {
  analysed: [400, 420],
  byFilter: [[1, 2]],
  followUp: [3, 4],
  notEnrolled: 5,
  outside: [0, 0],
  unknown: 0,
});
const found = effects(quantilePlan, arms, reduction);

/** Quantiles alone: one that decides, one that must not get worse, one without a width, one with an open end. */
export const quantiles: ReportInputs = {
  ...adopt,
  plan: quantilePlan,
  reduction,
  choices: [],
  effects: found,
  conclusion: conclusion(quantilePlan, found, [], reduction, arms),
};
