import type { Effect } from "./types.ts";

/** Up to so many effects all are drawn; ours, so that a page of many measures stays light. */
const FEW = 12;

/** Whether figures are drawn of an effect of so many: all of a few, of many those that decide. The others' numbers stand in tables. */
export function isPictured({ role }: Pick<Effect, "role">, effects: number): boolean {
  return effects <= FEW || role !== "secondary";
}
