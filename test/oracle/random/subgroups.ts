import type { Dice } from "./dice.ts";
import type { RandomPlan } from "./plan.ts";
import { NUMERIC_EXTRAS, type Shape, TEXT_EXTRAS } from "./shape.ts";
import type { Piece } from "./yaml.ts";

/** In half of the plans one or two columns that divide the units, somewhere in the text. */
export function withSubgroups(dice: Dice, plan: RandomPlan, { sources }: Shape): RandomPlan {
  if (dice.chance(0.5)) return plan;
  const events = sources.flatMap(({ names }) => (names.event === null ? [] : [names.event]));
  const isRole = (column: string) =>
    sources.some(({ names }) => [names.unit, names.time, names.variant, names.eventId].includes(column));
  const columns = [...TEXT_EXTRAS, ...TEXT_EXTRAS, ...NUMERIC_EXTRAS, ...events.filter((column) => !isRole(column))];
  const chosen = [...new Set([dice.pick(columns), dice.pick(columns)])].slice(0, dice.between(1, 2));
  const pieces = Object.entries(plan.pieces);
  const at = dice.between(0, pieces.length);
  const subgroups: [string, Piece] = ["subgroups", chosen];
  return { ...plan, pieces: Object.fromEntries([...pieces.slice(0, at), subgroups, ...pieces.slice(at)]) };
}
