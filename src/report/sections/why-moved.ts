import type { Plan } from "../../plan/index.ts";
import { count, list, quoted, rates } from "../../words/index.ts";
import type { ChangesJson, EffectChange } from "../changes/types.ts";
import { controlOf } from "../plan-words.ts";

/**
 * Why the estimate of the first share moved: how often those booked who are not counted any more. Only where visitors
 * were left out and nothing else can have moved it: the same log, and filters of visitors alone were changed.
 */
export function whyItMoved({ plan: changes, log, effects }: ChangesJson, plan: Plan): string[] {
  const counted = changes.filter(({ counts }) => counts);
  const onlyFilters =
    counted.length > 0 && counted.every(({ section, kind }) => section === "filters" && kind === "added");
  const dropsUnits = counted.every(({ item }) => plan.filters.find(({ name }) => name === item)?.drop === "units");
  if (log.length > 0 || !onlyFilters || !dropsUnits) return [];
  const first = plan.metrics.find(({ role, summary }) => role === "primary" && summary === "proportion");
  const effect = effects.find(({ metric }) => metric === first?.name);
  if (effect === undefined) return [];
  const groups = [leftOut(effect, "control"), leftOut(effect, "variant")];
  const names = [controlOf(plan).name, effect.variant];
  const { many } = plan.unitCalled;
  const told = groups.flatMap((group, i) => {
    if (group === null || group.units <= 0) return [];
    const { of, texts } = rates([group.total / group.units, group.stayed]);
    return [
      `${texts[0]} of ${of} with ${quoted(names[i] ?? "")} (${count(group.total)} of ${count(group.units)}; of those who stayed ${texts[1]} of ${of})`,
    ];
  });
  return told.length === 0 ? [] : [`Why it moved: ${effect.metric}, of the ${many} left out, ${list(told)}.`];
}

function leftOut({ before, after }: EffectChange, arm: "control" | "variant") {
  if (before?.totals[arm] == null || after?.totals[arm] == null || after.units[arm] === 0) return null;
  return {
    units: before.units[arm] - after.units[arm],
    total: before.totals[arm] - after.totals[arm],
    stayed: after.totals[arm] / after.units[arm],
  };
}
