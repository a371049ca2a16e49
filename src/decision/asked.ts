import type { Plan } from "../plan/types.ts";
import { goodWord, metricOf, ruleInWords } from "./measure.ts";
import { type Told, told, unmeasured } from "./told.ts";
import type { Effect, Zone } from "./types.ts";
import { ruleOf } from "./zones.ts";

/**
 * What the plan asked of a primary, and whether it got it: "Asked for: at least 5% more. Even the low end …". Of a
 * secondary metric, that it does not decide.
 */
export function askedSentence(effect: Effect, plan: Plan): string {
  if (effect.role === "secondary") return "For information: it does not decide.";
  const metric = metricOf(effect, plan);
  const texts = told(effect, plan);
  const stated = ruleOf(metric);
  const asked =
    stated === null
      ? `Asked for: any proven gain, and ${goodWord(metric)} is better.`
      : `Asked for: at least ${ruleInWords(metric, stated)}.`;
  // the sentence of the effect, which comes before, says why
  if (texts === null || unmeasured(effect, plan) !== null) return `${asked} Whether that is so cannot be told.`;
  return `${asked} ${answer(effect, plan, texts, stated !== null)}`;
}

function answer(effect: Effect, plan: Plan, texts: Told, hasAmount: boolean): string {
  if (!hasAmount) return ANY_GAIN[effect.zone]?.(texts) ?? noWords(effect);
  if (effect.zone === "better") return BETTER[plan.decision.adoptWhen](texts);
  if (effect.zone === "no-worthwhile-gain" && effect.eitherWay) return eitherWay(texts);
  return AT_LEAST[effect.zone]?.(texts) ?? noWords(effect);
}

type Sentences = { readonly [zone in Zone]?: (texts: Told) => string };

const AT_LEAST: Sentences = {
  worthwhile: ({ least }) => `Even the least that the interval allows, ${least}, goes beyond that.`,
  worse: ({ interval }) => `It went the other way (${interval}).`,
  "too-small": ({ most, interval }) => `The gain is real but smaller: ${most} at most (${interval}).`,
  "no-worthwhile-gain": ({ most, interval }) => `The interval rules that out: ${atMost(most)} (${interval}).`,
  "not-settled": ({ rule, least, most }) =>
    least === "" || most === ""
      ? `One end of the interval is open, so it is not settled.`
      : `The interval holds both "no gain" and "${rule}".`,
};

const BETTER = {
  "shown-better": ({ amount, interval }: Told) =>
    `The gain is real (${interval}); whether it reaches ${amount} is not settled. The plan says to adopt on any proven gain.`,
  "shown-worthwhile": ({ amount, interval }: Told) =>
    `The gain is real (${interval}); whether it reaches ${amount} is not settled, and the plan adopts only when that is proven.`,
};

const ANY_GAIN: Sentences = {
  better: ({ interval }) => `The whole interval is a gain (${interval}).`,
  worse: ({ interval }) => `It went the other way (${interval}).`,
  "not-settled": () => "The interval does not settle whether there is one.",
};

function eitherWay({ amount, interval }: Told): string {
  return `The interval rules that out, and a loss of ${amount} too (${interval}).`;
}

/** An end that is exactly 0 has no direction. */
function atMost(most: string): string {
  return most === "no difference" ? "no gain at best" : `${most} at most`;
}

function noWords(effect: Effect): never {
  throw new Error(`no words for ${effect.zone} of the ${effect.role} ${effect.metric}`);
}
