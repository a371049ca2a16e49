import type { ChoiceName, ChoiceRow, Choices, Effect } from "../../src/decision/index.ts";
import { placed } from "../../src/decision/index.ts";
import type { Metric } from "../../src/plan/types.ts";
import type { Contrast } from "../../src/stats/types.ts";
import { type HandArm, handContrast } from "./contrasts.ts";

/** Rows by hand: the plan's own contrast, and the same with the arms changed as each choice is said to change them. */
export function handChoices(
  effect: Effect,
  metric: Metric,
  arms: readonly (readonly [choice: ChoiceName, control: HandArm, variant: HandArm])[],
  logP: number | null = null,
): Choices {
  const own = rowOf("as-planned", effect.contrast, effect.zone);
  const others = arms.map(([choice, control, variant]) => {
    const contrast = handContrast(control, variant);
    return rowOf(choice, contrast, placed(metric, contrast).zone, effect.zone);
  });
  const log: ChoiceRow[] =
    logP === null
      ? []
      : [
          {
            choice: "log",
            difference: { estimate: null, low: null, high: null, p: logP },
            relative: null,
            zone: null,
            sign: own.sign,
            side: logP < 0.05 ? (own.sign ?? 0) : 0,
            agrees: logP < 0.05 === (own.side !== 0),
          },
        ];
  return { metric: effect.metric, variant: effect.variant, rows: [own, ...others, ...log] };
}

function rowOf(
  choice: ChoiceName,
  { difference, relative }: Contrast,
  zone: Effect["zone"],
  planned = zone,
): ChoiceRow {
  const { estimate, low, high, p } = difference;
  const sign = estimate === null ? null : estimate > 0 ? 1 : estimate < 0 ? -1 : 0;
  const side = low !== null && low > 0 ? 1 : high !== null && high < 0 ? -1 : 0;
  return {
    choice,
    difference: { estimate, low, high, p },
    relative,
    zone,
    sign,
    side,
    agrees: zone === planned,
  };
}
