import { type Effect, type Turn, whatWouldChange } from "../../decision/index.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import { capital, quoted } from "../../words/index.ts";

/** What would change the conclusion on one effect, as a short table. */
export interface TurningTable {
  readonly caption: string;
  readonly turns: readonly Turn[];
}

/** One table an effect of a metric that has anything to say. */
export function turningTables(
  plan: Plan,
  reduction: Reduction,
  effects: readonly Effect[],
  metric: string,
): TurningTable[] {
  const several = plan.variants.length > 2;
  return effects
    .filter((effect) => effect.metric === metric)
    .map((effect) => ({
      caption: captionOf(effect, several),
      turns: whatWouldChange(effect, plan, reduction).map(({ what, answer }) => ({ what, answer: capital(answer) })),
    }))
    .filter(({ turns }) => turns.length > 0);
}

function captionOf({ metric, variant, role }: Effect, several: boolean): string {
  const of = several ? `${metric} with ${quoted(variant)}` : metric;
  return role === "secondary" ? `${of}: what it amounts to` : `${of}: what would change it, and what it amounts to`;
}
