import type { Plan } from "../plan/types.ts";
import type { Contrast } from "../stats/types.ts";
import { intervalInWords, quoted } from "../words/index.ts";
import { decided } from "./decided.ts";
import { deciding } from "./deciding.ts";
import { controlOf } from "./effects.ts";
import { measure, metricOf } from "./measure.ts";
import type { ContrastNormality, Effect } from "./types.ts";
import { placed } from "./zones.ts";

/**
 * What the interval that does not count says, and whether the conclusion would be another: "The corrected interval is 5.1%
 * to 13.9% more, the normal one 5.0% to 13.7% more; the conclusion stays."
 * @param effects all of the report; null where it decides nothing, for then no conclusion can stay or change
 * @returns null where there is no other interval
 */
export function otherIntervalSentence(effect: Effect, plan: Plan, effects: readonly Effect[] | null): string | null {
  const { normality } = effect;
  if (normality?.other == null) return null;
  const other = withContrast(effect, plan, normality.other);
  const [counts, beside] = [intervalText(effect, plan), intervalText(other, plan)];
  if (counts === null || beside === null) return null;
  const isCorrected = deciding(effect).difference.method === "skew-corrected";
  const plain = PLAIN[deciding(isCorrected ? other : effect).difference.method] ?? "the plain one";
  const same = counts === beside;
  const [first, second] = isCorrected
    ? [
        `The corrected interval counts, ${counts}`,
        same ? `and ${plain} is the same to these digits` : `${plain} is ${beside}`,
      ]
    : [`The corrected interval is ${beside}`, same ? `the same as ${plain} to these digits` : `${plain} ${counts}`];
  const end = effects === null ? "" : `; ${conclusionBy(effect, other, plan, effects)}`;
  return `${first}, ${second}${end}.${uncorrected(normality)}`;
}

const PLAIN: { readonly [method: string]: string } = { normal: "the normal one", welch: "Welch\u2019s" };

/** Whether the rule would decide otherwise if this one contrast had its other interval. */
function conclusionBy(effect: Effect, other: Effect, plan: Plan, effects: readonly Effect[]): string {
  if (effect.zone === other.zone && effect.eitherWay === other.eitherWay) return "the conclusion stays";
  const now = decided(plan, effects);
  const then = decided(
    plan,
    effects.map((one) => (one === effect ? other : one)),
  );
  if (now.decision === then.decision && now.variant === then.variant) return "the conclusion stays";
  return `the conclusion changes: by ${deciding(effect).difference.method === "skew-corrected" ? "that" : "the corrected"} one, ${inWords(plan, then)}`;
}

function inWords(plan: Plan, { decision, variant }: Pick<ReturnType<typeof decided>, "decision" | "variant">): string {
  switch (decision) {
    case "adopt":
      return `adopt ${quoted(variant ?? "")}`;
    case "keep-control":
      return `stay with ${quoted(controlOf(plan).name)}`;
    case "not-settled":
      return "not settled";
    default:
      return unknown(decision);
  }
}

function unknown(decision: never): never {
  throw new Error(`no words for the decision ${String(decision)}`);
}

/** The effect with another contrast in the place of the one that decides. */
function withContrast(effect: Effect, plan: Plan, contrast: Contrast): Effect {
  const zone = placed(metricOf(effect, plan), contrast);
  if (effect.adjusted === null) return { ...effect, contrast, ...zone };
  return { ...effect, adjusted: { ...effect.adjusted, contrast }, ...zone };
}

function intervalText(effect: Effect, plan: Plan): string | null {
  const { interval, scale, words, marks } = measure(effect, plan);
  if (interval === null || (interval.low === null && interval.high === null)) return null;
  return intervalInWords(interval, scale, words, marks);
}

/** With arms of one size and shape nothing is left to correct. */
function uncorrected({ corrected, other }: ContrastNormality): string {
  const isOneSize = other !== null && other.control.units === other.variant.units;
  return isOneSize && corrected.skew === 0 ? " Groups of one size are not corrected: their skewness cancels." : "";
}
