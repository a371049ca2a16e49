import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { type Looks, pOfLooks } from "../stats/index.ts";
import { analysedUnits } from "./analysed.ts";

/** Planned interim looks (METHODS 5): what they make of the critical values, and of p. */

/** The plan as this look finds it: with the share of the planned units that was analysed, where it states their number. */
export function atThisLook(plan: Plan, reduction: Reduction): Plan {
  const { looks, plannedUnits } = plan;
  if (looks === null || plannedUnits === null) return plan;
  return { ...plan, looks: { ...looks, reached: analysedUnits(reduction) / plannedUnits } };
}

/** Nearer than this share of the planned size to the look before it, a look cannot be the one that the plan meant. */
const APART = 0.01;

/**
 * The looks so far. Where the earlier ones were is not known: they are taken at their shares in the plan; where this one
 * does not lie beyond them, in proportion to its own.
 */
export function looksSoFar({ looks }: Plan): Looks | null {
  if (looks === null) return null;
  const { planned, at, spending, reached } = looks;
  const own = planned[at - 1];
  if (own === undefined) throw new Error(`look ${at} of ${planned.length} in the plan`);
  const share = Math.max(reached ?? own, APART);
  const before = planned.slice(0, at - 1);
  const isBeyond = share >= (before.at(-1) ?? 0) + APART;
  const earlier = isBeyond ? before : before.map((other) => (other / own) * share);
  return { shares: [...earlier, share], spending, isLast: at === planned.length };
}

/** All looks as planned: what a test like this one, run to its end, is judged by. */
export function looksAsPlanned({ looks }: Plan): Looks | null {
  return looks === null ? null : { shares: looks.planned, spending: looks.spending, isLast: true };
}

/** Whether this is a look before the last: one that leaves something to spend for another. */
export function isInterim({ looks }: Plan): boolean {
  if (looks === null || looks.at === looks.planned.length) return false;
  return (looks.reached ?? 0) < 1;
}

/** p of a contrast that decides, adjusted for the looks so far; as it is where the plan has none. */
export function pAtLook(plan: Plan, p: number): number {
  const looks = looksSoFar(plan);
  return looks === null ? p : pOfLooks(looks, p);
}
