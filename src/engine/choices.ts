import type { Plan } from "../plan/index.ts";
import type { Engine } from "./engine.ts";
import { loggedChoices } from "./logs.ts";
import type { MeasuredMetric } from "./measuredMetric.ts";
import { capChoices } from "./otherCaps.ts";
import type { Dialect } from "./sql/index.ts";
import { unitChoices } from "./standings.ts";
import type { ChoiceCells } from "./types.ts";

/**
 * The metrics under other reasonable choices (METHODS 6), as far as they need other units or other values. A choice
 * differs from the plan's own by few units: only their sums are asked for, and added to the plan's or taken from them,
 * exactly. A choice that cannot differ is not among them, and costs nothing. Quantiles have none here.
 */
export async function choiceCells(
  plan: Plan,
  metrics: readonly MeasuredMetric[],
  engine: Engine,
  dialect: Dialect,
): Promise<ChoiceCells[][]> {
  const summed = metrics.filter(({ metric }) => metric.summary !== "quantile");
  const ofUnits = await unitChoices(plan, summed, engine, dialect);
  const caps = await capChoices(summed, engine, dialect);
  const logs = await loggedChoices(summed, engine, dialect);
  return metrics.map((one) => {
    const m = summed.indexOf(one);
    return [...(caps[m] ?? []), ...(logs[m] ?? []), ...(ofUnits[m] ?? [])];
  });
}
