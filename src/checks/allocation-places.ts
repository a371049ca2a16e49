import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { pearson } from "../stats/index.ts";
import { pText } from "../words/index.ts";
import { days } from "./allocation-by-day.ts";
import { levelGroupings } from "./allocation-by-level.ts";
import type { Grouping } from "./by-group.ts";
import { added } from "./flow.ts";
import { groupsAlike, groupsOff } from "./groups.ts";
import { sum } from "./ledger.ts";
import { byP } from "./limits.ts";
import { plannedShares } from "./planned-shares.ts";
import { groups as groupsText } from "./words.ts";

/**
 * Where an uneven split lies: the days, or the levels of a subgroup column, without which it is as planned. Nothing is said
 * where the split is alike on all of them, or the rest is uneven too.
 */
export function whereItLies(plan: Plan, reduction: Reduction, stage: "enrolled" | "analysed"): string[] {
  const byDay = days(plan, reduction);
  const groupings = [...(byDay === null ? [] : [byDay]), ...levelGroupings(plan, reduction)];
  return groupings.flatMap((grouping) => lies(plan, grouping, stage));
}

function lies(plan: Plan, grouping: Grouping, stage: "enrolled" | "analysed"): string[] {
  const counts = grouping.groups.map(
    ({ ended }): ByVariant => (stage === "enrolled" ? added(ended) : (ended.at(-1) ?? [])),
  );
  const test = groupsAlike(counts);
  if (test === null || byP(test.p) === "pass") return [];
  const off = groupsOff(plan, counts);
  const rest = added(counts.filter((_, i) => !off.includes(i)));
  if (sum(rest) === 0) return [];
  const { p } = pearson(rest, plannedShares(plan));
  if (byP(p) !== "pass") return [];
  const here = added(counts.filter((_, i) => off.includes(i)));
  return [
    `It lies ${grouping.at(off)}: ${groupsText(plan, here)}; without ${off.length === 1 ? "it" : "them"} the groups are ${groupsText(plan, rest)}, as planned (${pText(p)}).`,
  ];
}
