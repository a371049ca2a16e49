import type { Dice } from "./dice.ts";
import { digits, type RandomPlan } from "./plan.ts";
import { NUMERIC_EXTRAS, type Shape } from "./shape.ts";
import type { Piece } from "./yaml.ts";

const DAY_US = 86_400_000_000n;

/**
 * In a third of the plans with time a follow-up of several days, rows on all of them, and measures that mostly decide: those
 * are told by day since enrolment.
 */
export function withDays(dice: Dice, plan: RandomPlan, shape: Shape): { plan: RandomPlan; shape: Shape } {
  const { metrics, "follow-up": followUp } = plan.pieces;
  if (!shape.hasTime || !Array.isArray(metrics) || dice.chance(0.65)) return { plan, shape };
  const decide = (metrics as readonly { readonly [key: string]: Piece }[]).map((metric) =>
    metric.role === "primary" || metric.role === "guardrail" || dice.chance(0.2)
      ? metric
      : { ...metric, role: "guardrail", margin: { relative: digits("10%") } },
  );
  // Other measures mostly count rare rows: this one counts them all.
  const all = { name: "all rows", role: "guardrail", margin: { relative: digits("10%") }, summary: "mean" };
  const of = { sum: dice.pick(NUMERIC_EXTRAS) };
  const more = dice.pick<readonly Piece[]>([[], [{ ...all, of }], [{ ...all, of, cap: { at: digits("3") } }]]);
  const days = digits(dice.pick(["2", "2", "2", "3", "2.5"]));
  const given = (followUp ?? {}) as { readonly [key: string]: Piece };
  const later = shape.instants.flatMap((instant) =>
    [1n, 2n, 3n, 4n].map((day) => instant + day * DAY_US + dice.pick([-1n, 0n, 0n, 3_600_000_000n])),
  );
  return {
    plan: { ...plan, pieces: { ...plan.pieces, metrics: [...decide, ...more], "follow-up": { ...given, days } } },
    shape: { ...shape, instants: [...shape.instants, ...later] },
  };
}
