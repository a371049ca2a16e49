import type { Amount, Plan } from "../plan/types.ts";
import { beyondWorthwhile, detectable, exaggeration, isAbsent, type Question, unitsFor } from "../stats/index.ts";
import type { Absent, Contrast } from "../stats/types.ts";
import { criticalAtEnd } from "./critical.ts";
import { deciding } from "./deciding.ts";
import { metricOf } from "./measure.ts";
import type { Effect, Power } from "./types.ts";
import { ruleOf } from "./zones.ts";

export { analysedUnits } from "./analysed.ts";

export const NO_POWER: Power = { detectable: null, unitsForWorthwhile: null, exaggeration: null };

/**
 * What the test could find with its units, and how many the plan's question needs (METHODS 4). Never from the observed
 * effect: only the spread, the critical value that decides and the control's level are taken from the data.
 * @param units all analysed units of all arms
 */
export function withPower(effect: Effect, plan: Plan, units: number): Effect {
  const { critical, difference } = deciding(effect);
  const { standardError } = difference;
  if (standardError === null) return { ...effect, power: NO_POWER };
  const asked = questionOfNextTest(effect, plan, units);
  const worthwhile = effect.role === "primary" ? amountOf(ruleOf(metricOf(effect, plan)), deciding(effect)) : null;
  return {
    ...effect,
    power: {
      detectable: detectable(critical, plan.decision.power, standardError),
      unitsForWorthwhile: asked === null || isAbsent(asked) ? null : unitsFor(asked, plan.decision.power),
      exaggeration: worthwhile === null ? null : exaggeration(worthwhile, standardError, critical).factor,
    },
  };
}

/**
 * What the plan asks of an effect, as a question to size a test for.
 * @returns null where it asks nothing, or where the data give no standard error or no control's level above 0 to take a
 *   share of; `no-expected-effect` where a worthwhile effect is to be shown and none larger is expected
 */
export function questionOf(effect: Effect, plan: Plan, units: number): Question | Absent | null {
  const contrast = deciding(effect);
  const { standardError } = contrast.difference;
  const distance = distanceOf(effect, plan, contrast);
  if (distance === null || standardError === null) return null;
  return isAbsent(distance) ? distance : { units, critical: contrast.critical, standardError, distance };
}

/** The same of a test to come: with planned looks it is judged by the last of their boundaries, and not by this look's. */
export function questionOfNextTest(effect: Effect, plan: Plan, units: number): Question | Absent | null {
  const question = questionOf(effect, plan, units);
  if (question === null || isAbsent(question)) return question;
  return { ...question, critical: criticalAtEnd(plan, metricOf(effect, plan), question.critical) };
}

/** How far the true effect is taken to lie from the limit that the interval must clear, in the metric's unit. */
function distanceOf(effect: Effect, plan: Plan, contrast: Contrast): number | Absent | null {
  const metric = metricOf(effect, plan);
  const asked = amountOf(ruleOf(metric), contrast);
  if (asked === null || metric.role !== "primary" || plan.decision.adoptWhen === "shown-better") return asked;
  return beyondWorthwhile(asked, amountOf(metric.expected, contrast));
}

/** An amount of the plan in the metric's unit, a share of the control's level as that many of its units. */
function amountOf(amount: Amount | null, { control }: Contrast): number | null {
  if (amount === null || amount.kind === "absolute") return amount === null ? null : amount.value;
  return control.mean !== null && control.mean > 0 ? amount.value * control.mean : null;
}
