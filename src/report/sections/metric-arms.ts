import type { Effect } from "../../decision/index.ts";
import type { Metric, Plan } from "../../plan/types.ts";
import type { ArmFigures } from "../../stats/types.ts";
import { capital, count, percentile } from "../../words/index.ts";
import { levelsText, NONE, sideBySide } from "../effect-text.ts";

/** Of one metric the figures of each arm, a row a variant. */
export interface ArmText {
  readonly variant: string;
  readonly cells: readonly string[];
}

export function armColumns(metric: Metric, plan: Plan): string[] {
  const unit = metric.unitOfMeasure === null ? "" : `, ${metric.unitOfMeasure}`;
  const many = capital(plan.unitCalled.many);
  if (metric.summary === "proportion") return [many, "With", "Share"];
  if (metric.summary === "ratio-of-totals") return [many, `Total${unit}`, "Ratio", "Standard deviation of the score"];
  if (metric.quantile !== null) {
    return [many, `${capital(percentile(metric.quantile))}${unit}`, `Smallest${unit}`, `Largest${unit}`];
  }
  return [many, `Total${unit}`, `Mean${unit}`, `Standard deviation${unit}`, `Smallest${unit}`, `Largest${unit}`];
}

export function armRows(metric: Metric, plan: Plan, effects: readonly Effect[]): ArmText[] {
  const arms = plan.variants.flatMap(({ name, isControl }): { name: string; arm: ArmFigures }[] => {
    if (isControl) return effects[0] === undefined ? [] : [{ name, arm: effects[0].contrast.control }];
    const own = effects.find((effect) => effect.variant === name);
    return own === undefined ? [] : [{ name, arm: own.contrast.variant }];
  });
  const column = (pick: (arm: ArmFigures) => number | null) => sideBySide(arms.map(({ arm }) => pick(arm)));
  const units = arms.map(({ arm }) => count(arm.units));
  const totals = column((arm) => arm.total);
  if (metric.summary === "proportion") {
    const { levels } = levelsText(
      arms.map(({ arm }) => arm.mean),
      metric,
    );
    return arms.map(({ name }, i) => ({
      variant: name,
      cells: [units[i], totals[i], levels[i]].map((cell) => cell ?? NONE),
    }));
  }
  const means = column((arm) => arm.mean);
  const sds = column((arm) => arm.sd);
  const ends = [column((arm) => arm.smallest), column((arm) => arm.largest)];
  const columns = {
    mean: [units, totals, means, sds, ...ends],
    "ratio-of-totals": [units, totals, means, sds],
    quantile: [units, means, ...ends],
  }[metric.summary];
  return arms.map(({ name }, i) => ({ variant: name, cells: columns.map((texts) => texts[i] ?? NONE) }));
}
