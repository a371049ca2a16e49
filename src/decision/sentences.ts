import type { Plan } from "../plan/types.ts";
import { list, quoted } from "../words/index.ts";
import { controlOf } from "./effects.ts";
import { anyIsEnough, isEnough, primariesPass, ruledOutBy, type Verdict } from "./rule.ts";
import { type Told, told } from "./told.ts";
import type { Effect, Zone } from "./types.ts";
import { notRuledOut } from "./words.ts";

// Variants are named in quotes and without an article: names are arbitrary text, and "Adopt no banner." or "Adopt the B."
// would not read; a quoted name always does.

/** Where any one primary is enough also which of them it was. */
export function adoptSentence(plan: Plan, { variant, primaries }: Verdict): string {
  const adopt = `Adopt ${quoted(variant)}.`;
  if (!anyIsEnough(plan)) return adopt;
  const passed = enough(plan, primaries).map(({ metric }) => metric);
  const others = primaries.map(({ metric }) => metric).filter((metric) => !passed.includes(metric));
  if (others.length === 0) return adopt;
  const asked = list(primaries.map(({ metric }) => metric));
  return `${adopt} The plan asks for one of ${asked}: ${list(passed)} passed, and ${list(others, "or")} is not shown to be worse.`;
}

/**
 * Several variants passed: which, and that the one adopted did best on the first primary, or stands first in the plan.
 * @param compared whether the best two differ on the first primary; `null` where that has no estimate
 */
export function alsoPassed(
  best: string,
  others: readonly string[],
  metric: string,
  compared: "differ" | "tie" | null,
): string {
  const passed = `${list(others.map(quoted))} passed too`;
  if (compared === null) return `${passed}; ${quoted(best)} stands first in the plan.`;
  return compared === "tie"
    ? `${passed}, and no less well on ${metric}; ${quoted(best)} stands first in the plan.`
    : `${passed}; ${quoted(best)} did best on ${metric}.`;
}

export function undecidableSentence(plan: Plan): string {
  const names = plan.variants.filter((variant) => !variant.isControl).map(({ name }) => quoted(name));
  const have = names.length === 1 ? "has" : "have";
  return `No decision from this data yet. It must be mended first; ${list(names)} ${have} not been judged.`;
}

/** "Stay with …", and for each variant what rules it out first. */
export function keepSentence(plan: Plan, verdicts: readonly Verdict[]): string {
  return [
    `Stay with ${quoted(controlOf(plan).name)}.`,
    ...verdicts.map((verdict) => ruledOutSentence(plan, verdict)),
  ].join(" ");
}

/** What is open for the one variant that still is, or that several are; then those that are ruled out. */
export function notSettledSentence(plan: Plan, verdicts: readonly Verdict[]): string {
  const open = verdicts.filter(({ verdict }) => verdict === "open");
  const out = verdicts.filter(({ verdict }) => verdict === "blocked").map(({ variant }) => quoted(variant));
  const rest = out.length === 0 ? "" : ` ${list(out)} ${out.length === 1 ? "is" : "are"} ruled out.`;
  const [only] = open;
  const missing = open.length === 1 && only !== undefined ? stillMissing(plan, only) : null;
  if (missing !== null) return `Not settled: ${missing}${rest}`;
  const names = list(
    open.map(({ variant }) => quoted(variant)),
    "or",
  );
  return `Not settled: this test can neither recommend ${names} nor advise against ${open.length === 1 ? "it" : "them"}.${rest}`;
}

/** What blocks a variant: the primaries that rule it out, else a guardrail beyond its limit. */
function ruledOutSentence(plan: Plan, { primaries, guardrails }: Verdict): string {
  const out = ruledOutBy(plan, primaries);
  if (out.length > 0) return out.map((primary) => fromTable(RULED_OUT, primary, plan)).join(" ");
  const guardrail = guardrails.find(({ zone }) => zone === "beyond");
  if (guardrail === undefined) throw new Error("a variant is blocked, and by nothing");
  const passed = primariesPass(plan, primaries) ? `${wereBetter(enough(plan, primaries))}, but ` : "";
  return passed + fromTable(RULED_OUT, guardrail, plan);
}

/** What keeps a variant from passing when its primaries point to it; null when they do not. */
function stillMissing(plan: Plan, { variant, primaries, guardrails }: Verdict): string | null {
  const open = guardrails.filter(({ zone }) => zone === "not-settled");
  const [guardrail] = open;
  const but = (better: readonly Effect[]) => `${wereBetter(better)} with ${quoted(variant)}, but `;
  if (guardrail !== undefined && primariesPass(plan, primaries)) {
    return `${but(enough(plan, primaries))}${notRuledOut(guardrail, plan)}${intervalOf(guardrail, plan)}.`;
  }
  const better = primaries.filter(({ zone }) => zone === "better" || zone === "worthwhile");
  const unproven = better.find((effect) => !isEnough(plan, effect));
  const pointToIt = anyIsEnough(plan) || better.length === primaries.length;
  if (unproven === undefined || !pointToIt || open.length > 0) return null;
  const amount = told(unproven, plan)?.amount ?? "";
  return amount === ""
    ? `${but(better)}the plan adopts only on a gain it calls worthwhile, and states none for ${unproven.metric}.`
    : `${but(better)}a gain of ${amount} is not proven${intervalOf(unproven, plan)}.`;
}

function enough(plan: Plan, primaries: readonly Effect[]): Effect[] {
  return primaries.filter((effect) => isEnough(plan, effect));
}

type Sentences = { readonly [zone in Zone]?: (texts: Told, effect: Effect) => string };

const RULED_OUT: Sentences = {
  worse: ({ metric, moved }) => `${metric} ${moved}, which is the wrong way.`,
  "too-small": ({ metric, variant, amount, interval }) =>
    `${metric}: ${variant} helps, but by less than the ${amount} asked for (${interval}).`,
  "no-worthwhile-gain": ({ metric, variant, amount, interval }, { eitherWay }) =>
    eitherWay
      ? `${metric}: with ${variant} a gain of ${amount} is ruled out, and so is a loss of ${amount} (${interval}).`
      : `${metric}: ${variant} may help, but by less than the ${amount} asked for (${interval}).`,
  beyond: ({ metric, moved, amount }) => `${metric} ${moved}, beyond the limit of ${amount}.`,
};

function fromTable(table: Sentences, effect: Effect, plan: Plan): string {
  const texts = told(effect, plan);
  const sentence = table[effect.zone];
  if (texts === null || sentence === undefined) {
    throw new Error(`${effect.metric} is ${effect.zone} without an interval or without words for it`);
  }
  return sentence(texts, effect);
}

function wereBetter(primaries: readonly Effect[]): string {
  return `${list(primaries.map(({ metric }) => metric))} ${primaries.length === 1 ? "was" : "were"} better`;
}

function intervalOf(effect: Effect, plan: Plan): string {
  const texts = told(effect, plan);
  return texts === null ? "" : ` (${texts.interval})`;
}
