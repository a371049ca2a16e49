import type { Dice } from "./dice.ts";
import { digits, type RandomPlan } from "./plan.ts";
import type { Shape } from "./shape.ts";
import type { Piece } from "./yaml.ts";

/** Other rules need no more units than this; with fewer than some ten an arm has no ranks for both ends of an interval. */
export const MANY_UNITS = 10;

const SHARES = ["0.5", "0.5", "0.25", "0.9", "75%", "0.6", "12.5%", "0.01", "0.333"];

/** Now and then sixty units more, and then most means become quantiles; else some of the plain ones. */
export function withQuantiles(dice: Dice, plan: RandomPlan, shape: Shape): { plan: RandomPlan; shape: Shape } {
  const { metrics } = plan.pieces;
  if (!Array.isArray(metrics)) throw new Error("a plan without a list of metrics");
  const many = dice.chance(0.15);
  const changed = (metrics as readonly { readonly [key: string]: Piece }[]).map((metric) => {
    // Neither is for quantiles.
    const { cap, "adjust-for": covariate, ...rest } = metric;
    const isPlain = cap === undefined && covariate === undefined;
    const isChanged = many ? dice.chance(0.9) : isPlain && dice.chance(0.3);
    return isChanged && metric.summary === "mean"
      ? { ...rest, summary: "quantile", quantile: digits(dice.pick(SHARES)) }
      : metric;
  });
  const more = Array.from({ length: 60 }, (_, i) => `unit ${i}`);
  return {
    plan: { ...plan, pieces: { ...plan.pieces, metrics: changed } },
    shape: many ? { ...shape, units: [...shape.units, ...more] } : shape,
  };
}
