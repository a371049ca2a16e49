import { type Check, checks as soundnessChecks } from "./checks/index.ts";
import {
  effects as allEffects,
  atThisLook,
  type Conclusion,
  conclusion as concluded,
  contrastFigures,
  type Effect,
  withDraws,
} from "./decision/index.ts";
import { type DrawOptions, withDrawers } from "./drawers.ts";
import type { Measured } from "./measure.ts";
import type { Plan } from "./plan/index.ts";

/** What the rule makes of the figures; nothing is drawn yet. */
export interface Judged {
  readonly effects: readonly Effect[];
  readonly checks: readonly Check[];
  readonly conclusion: Conclusion;
  /** Of the metrics that were asked afterwards: no check and no rule looks at them. */
  readonly afterwards: readonly Effect[];
}

export function judged(planned: Plan, measured: Measured): Judged {
  const { reduction, arms, pairs, afterwards: further } = measured;
  const plan = atThisLook(planned, reduction);
  const effects = effectsOf(planned, measured);
  const checks = soundnessChecks(plan, reduction, effects.map(contrastFigures));
  return {
    effects,
    checks,
    conclusion: concluded(plan, effects, checks, reduction, arms, pairs),
    afterwards: further === null ? [] : effectsOf(further.plan, further.measured),
  };
}

/** With what is drawn: the longest part of a large report, and the conclusion does not need it. */
export function drawn(found: Judged, options: DrawOptions): Promise<Judged> {
  const { effects, afterwards } = found;
  const toDraw = [...effects, ...afterwards].map((effect) => effect.toDraw);
  return withDrawers(toDraw, options, async (draw) => {
    const [ofPlan, further] = await Promise.all([withDraws(effects, draw), withDraws(afterwards, draw)]);
    return { ...found, effects: ofPlan, afterwards: further };
  });
}

function effectsOf(planned: Plan, { reduction, arms, pairs }: Measured): Effect[] {
  return allEffects(atThisLook(planned, reduction), arms, reduction, pairs);
}
