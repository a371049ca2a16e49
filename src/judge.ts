import { type Check, checks as soundnessChecks } from "./checks/index.ts";
import {
  effects as allEffects,
  atThisLook,
  type Conclusion,
  conclusion as concluded,
  contrastFigures,
  type Effect,
} from "./decision/index.ts";
import type { Measured } from "./measure.ts";
import type { Plan } from "./plan/index.ts";

/** What the rule makes of the figures. */
export interface Judged {
  readonly effects: readonly Effect[];
  readonly checks: readonly Check[];
  readonly conclusion: Conclusion;
}

export function judged(planned: Plan, { reduction, arms, pairs }: Measured): Judged {
  const plan = atThisLook(planned, reduction);
  const effects = allEffects(plan, arms, reduction, pairs);
  const checks = soundnessChecks(plan, reduction, effects.map(contrastFigures));
  return { effects, checks, conclusion: concluded(plan, effects, checks, reduction, arms, pairs) };
}
