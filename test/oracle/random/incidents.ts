import { ascending } from "../number.ts";
import type { Dice } from "./dice.ts";
import { digits, isoText, type RandomPlan, reordered } from "./plan.ts";
import type { Shape } from "./shape.ts";
import { drawWhere } from "./where.ts";
import type { Piece } from "./yaml.ts";

const DAY = 86_400_000_000n; // microseconds

/** Now and then an incident or two, somewhere among the plan's keys. */
export function withIncidents(dice: Dice, plan: RandomPlan, shape: Shape): RandomPlan {
  const times = [...new Set(shape.instants)].sort(ascending);
  if (!shape.hasTime || times.length < 2 || dice.chance(0.4)) return plan;
  const incidents = ["outage", 'it\'s: "odd"'].slice(0, dice.between(1, 2)).map((name): Piece => {
    const at = dice.below(times.length - 1);
    const [from = 0n, before = 0n] = [times[at], times[dice.between(at + 1, times.length - 1)]];
    // A day alone is local, an instant is UTC: three days later is surely later.
    const days = { from: digits(day(from)), before: digits(day(from + 3n * DAY)) };
    return reordered(dice, {
      name,
      ...(dice.chance(0.3) ? days : { from: isoText(from), before: isoText(before) }),
      ...(dice.chance(0.5) ? { where: drawWhere(dice, shape) } : {}),
      ...dice.pick([{}, { what: "cards were refused" }]),
    });
  });
  const pieces = Object.entries(plan.pieces);
  const at = dice.between(0, pieces.length);
  return { ...plan, pieces: Object.fromEntries(pieces.toSpliced(at, 0, ["incidents", incidents])) };
}

const day = (us: bigint): string => isoText(us).slice(0, 10);
