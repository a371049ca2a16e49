import type { Effect } from "../decision/index.ts";

/** Up to so many effects all are drawn; ours, so that a page of many measures stays light. */
const FEW = 12;

/** The effects that figures are drawn of: all of a few, of many those that decide. The others' numbers stand in tables. */
export function drawnEffects(effects: readonly Effect[]): ReadonlySet<Effect> {
  return new Set(effects.length <= FEW ? effects : effects.filter(({ role }) => role !== "secondary"));
}
