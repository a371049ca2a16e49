import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, endSize, list, plural, quoted } from "../words/index.ts";
import { controlOf } from "./effects.ts";
import { isInterim } from "./looks.ts";
import { ALL_LOOKS_MADE, goOnSentence } from "./looks-words.ts";
import { measure } from "./measure.ts";
import { enrolledADay, plannedADay } from "./next-test.ts";
import { analysedUnits } from "./power.ts";
import { whatWouldSettle } from "./settle.ts";
import { intervalLabel } from "./told.ts";
import type { Conclusion, Effect } from "./types.ts";
import { absoluteSentence } from "./words.ts";

/** What page one says after the reasons: what the effect amounts to, or what is missing and what to do now. */
export function nextSentences(
  plan: Plan,
  effects: readonly Effect[],
  { decision, variant }: Conclusion,
  reduction: Reduction,
): string[] {
  switch (decision) {
    case "adopt":
      return effects
        .filter((effect) => effect.role === "primary" && effect.variant === variant)
        .flatMap((effect) => absoluteSentence(effect, plan) ?? []);
    case "keep-control":
      return [];
    case "not-settled":
      return [
        ...notProven(plan, effects),
        whyNotSettled(plan, reduction),
        ...(isInterim(plan) ? [goOnSentence(plan)] : [whatWouldSettle(plan, effects, reduction), noMoreDays(plan)]),
        untilThen(plan),
      ];
    case "undecidable":
      return [
        "No effect is shown on this page, since groups or rows with such a fault cannot be compared.",
        "Figures further back are for finding the fault, not for deciding.",
      ];
  }
}

function noMoreDays({ looks }: Plan): string {
  if (looks !== null) return ALL_LOOKS_MADE;
  return 'Adding days to this test now and looking again would make a false "adopt" more likely: plan the looks first.';
}

/** "This is not proof that nothing changed. …" for the first primary that is not settled. */
export function notProven(plan: Plan, effects: readonly Effect[]): string[] {
  const effect = effects.find(({ role, zone }) => role === "primary" && zone === "not-settled");
  if (effect === undefined) return [];
  const { interval, scale, marks } = measure(effect, plan);
  if (interval === null) return ["This is not proof that nothing changed."];
  const [fall, rise] = [endSize(interval, "low", scale, marks), endSize(interval, "high", scale, marks)];
  const whole = interval.low !== null && interval.low < 0 && interval.high !== null && interval.high > 0;
  const unlikely = whole
    ? ` Of ${effect.metric} with ${quoted(effect.variant)} a fall of more than ${fall} and a rise of more than ${rise} are unlikely (${intervalLabel(plan)}).`
    : "";
  return [`This is not proof that nothing changed.${unlikely}`];
}

/** "Why: 42,828 visitors were counted; the plan asked for 100,000. They enrolled at 3,060 a day instead of 7,140." */
export function whyNotSettled(plan: Plan, reduction: Reduction): string {
  const counted = analysedUnits(reduction);
  const { one, many } = plan.unitCalled;
  const were = `Why: ${plural(counted, one, many)} ${counted === 1 ? "was" : "were"} counted`;
  if (plan.plannedUnits !== null && counted < plan.plannedUnits) {
    return `${were}; the plan asked for ${count(plan.plannedUnits)}.${paceSentence(plan, reduction)}`;
  }
  const asPlanned = plan.plannedUnits === null ? "" : `, as many as the plan asked for (${count(plan.plannedUnits)})`;
  return `${were}${asPlanned}; with so many the intervals are still too wide for the plan's rule.`;
}

const SLOWER = 0.95; // ours: a pace nearer than this to the planned one explains nothing

function paceSentence(plan: Plan, reduction: Reduction): string {
  const [ran, planned] = [enrolledADay(reduction), plannedADay(plan)];
  if (ran === null || planned === null || ran > SLOWER * planned) return "";
  const [slow, fast] = [ran, planned].map((pace) => count(Math.round(Number(pace.toPrecision(3)))));
  return ran < 1 ? "" : ` They enrolled at ${slow} a day instead of ${fast}.`;
}

/** 'Until then: stay with "list", unless there are other reasons for "calendar".' */
export function untilThen(plan: Plan): string {
  const others = plan.variants.filter((variant) => !variant.isControl).map(({ name }) => quoted(name));
  return `Until then: stay with ${quoted(controlOf(plan).name)}, unless there are other reasons for ${list(others, "or")}.`;
}
