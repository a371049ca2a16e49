import { type Effect, isPictured } from "../decision/index.ts";

/** The effects that figures are drawn of. */
export function drawnEffects(effects: readonly Effect[]): ReadonlySet<Effect> {
  return new Set(effects.filter((effect) => isPictured(effect, effects.length)));
}
