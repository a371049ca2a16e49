import type { Arm } from "../cells/types.ts";
import type { Check } from "../checks/types.ts";
import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { askedSentence } from "./asked.ts";
import { betweenSentence } from "./between.ts";
import type { Pair } from "./covariates.ts";
import { deciding } from "./deciding.ts";
import { metricOf } from "./measure.ts";
import { type Verdict, verdictOn } from "./rule.ts";
import { adoptSentence, alsoPassed, keepSentence, notSettledSentence, undecidableSentence } from "./sentences.ts";
import type { Conclusion, Effect } from "./types.ts";
import { obstacles } from "./undecidable.ts";
import { effectSentence, guardrailSentence } from "./words.ts";
import { turned } from "./zones.ts";

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
  const variants = plan.variants.filter((variant) => !variant.isControl);
  const verdicts = variants.map(({ name }) => verdictOn(plan, name, effects));
  const reasons = effects.flatMap((effect) => reason(effect, plan));

  const passing = bestFirst(
    plan,
    verdicts.filter(({ verdict }) => verdict === "passes"),
  );
  const [best, second] = passing;
  if (best !== undefined) {
    const sentence = adoptSentence(plan, best);
    if (second === undefined) return { decision: "adopt", variant: best.variant, sentence, reasons };
    return {
      decision: "adopt",
      variant: best.variant,
      sentence: `${sentence} ${passedToo(plan, passing)}`,
      reasons: [...reasons, between(plan, best, second, arms, pairs)],
    };
  }
  if (verdicts.every(({ verdict }) => verdict === "blocked")) {
    return { decision: "keep-control", variant: null, sentence: keepSentence(plan, verdicts), reasons };
  }
  return { decision: "not-settled", variant: null, sentence: notSettledSentence(plan, verdicts), reasons };
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

/** By the estimate on the first primary, signs turned; the sort is stable, so a tie keeps the plan's order. */
function bestFirst(plan: Plan, verdicts: readonly Verdict[]): Verdict[] {
  return [...verdicts].sort((a, b) => {
    const [of, other] = [gainOn(plan, a), gainOn(plan, b)];
    return of === other ? 0 : other - of;
  });
}

/** Last of all where it has no estimate, which only happens where another primary is enough. */
function gainOn(plan: Plan, { primaries: [first] }: Verdict): number {
  if (first === undefined) throw new Error("a plan came here without a primary");
  const { estimate } = deciding(first).difference;
  if (estimate === null) return Number.NEGATIVE_INFINITY;
  return turned(metricOf(first, plan), { low: estimate, high: estimate }).low ?? estimate;
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
  arms: readonly (readonly Arm[])[],
  pairs: readonly Pair[],
): string {
  const [first] = best.primaries;
  if (first === undefined) throw new Error("a plan came here without a primary");
  return betweenSentence(plan, metricOf(first, plan), arms, pairs, best.variant, second.variant);
}
