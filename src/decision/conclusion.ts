import type { Arm } from "../cells/types.ts";
import type { Check } from "../checks/types.ts";
import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { askedSentence } from "./asked.ts";
import { betweenSentence } from "./between.ts";
import type { Pair } from "./covariates.ts";
import { decided, gainOn } from "./decided.ts";
import { metricOf } from "./measure.ts";
import type { Verdict } from "./rule.ts";
import { adoptSentence, alsoPassed, keepSentence, notSettledSentence, undecidableSentence } from "./sentences.ts";
import type { Conclusion, Effect } from "./types.ts";
import { obstacles } from "./undecidable.ts";
import { effectSentence, guardrailSentence } from "./words.ts";

/**
 * The plan's rule applied (METHODS 2 and 7), in the order of METHODS: undecidable, adopt, keep the control, not settled.
 * @param arms and pairs as for `effects`; only where several variants pass, for the contrast between the best two
 */
export function conclusion(
  plan: Plan,
  effects: readonly Effect[],
  checks: readonly Check[],
  reduction: Reduction,
  arms: readonly (readonly Arm[])[],
  pairs: readonly Pair[] = [],
): Conclusion {
  const stopped = obstacles(plan, checks, reduction);
  if (stopped.length > 0) {
    return { decision: "undecidable", variant: null, sentence: undecidableSentence(plan), reasons: stopped };
  }
  const reasons = effects.flatMap((effect) => reason(effect, plan));
  const { decision, variant, verdicts, passing } = decided(plan, effects);
  switch (decision) {
    case "adopt": {
      const [best, second] = passing;
      if (best === undefined) throw new Error("a variant is adopted and none passes");
      const sentence = adoptSentence(plan, best);
      if (second === undefined) return { decision, variant, sentence, reasons };
      return {
        decision,
        variant,
        sentence: `${sentence} ${passedToo(plan, passing)}`,
        reasons: [...reasons, between(plan, best, second, reduction, arms, pairs)],
      };
    }
    case "keep-control":
      return { decision, variant, sentence: keepSentence(plan, verdicts), reasons };
    case "not-settled":
      return { decision, variant, sentence: notSettledSentence(plan, verdicts), reasons };
    default:
      return unknown(decision);
  }
}

function unknown(decision: never): never {
  throw new Error(`no sentence for the decision ${String(decision)}`);
}

/** What decided, with its figures: a primary and what was asked of it, or a guardrail and its limit. */
function reason(effect: Effect, plan: Plan): string[] {
  switch (effect.role) {
    case "primary":
      return [`${effectSentence(effect, plan)} ${askedSentence(effect, plan)}`];
    case "guardrail":
      return [guardrailSentence(effect, plan)];
    case "secondary":
      return [];
  }
}

function passedToo(plan: Plan, [best, ...others]: readonly Verdict[]): string {
  const [first] = best?.primaries ?? [];
  const [second] = others;
  if (best === undefined || first === undefined || second === undefined)
    throw new Error("nothing passed beside the best");
  const gains = [gainOn(plan, best), gainOn(plan, second)] as const;
  const compared = gains[0] === Number.NEGATIVE_INFINITY ? null : gains[0] === gains[1] ? "tie" : "differ";
  return alsoPassed(
    best.variant,
    others.map(({ variant }) => variant),
    first.metric,
    compared,
  );
}

function between(
  plan: Plan,
  best: Verdict,
  second: Verdict,
  reduction: Reduction,
  arms: readonly (readonly Arm[])[],
  pairs: readonly Pair[],
): string {
  const [first] = best.primaries;
  if (first === undefined) throw new Error("a plan came here without a primary");
  return betweenSentence(plan, metricOf(first, plan), reduction, arms, pairs, best.variant, second.variant);
}
