import type { Plan } from "../plan/types.ts";
import type { Effect, Zone } from "./types.ts";

/** One variant's effects on what decides: the primaries and the guardrails, each in plan order. */
export interface Verdict {
  readonly variant: string;
  readonly primaries: readonly Effect[];
  readonly guardrails: readonly Effect[];
  readonly verdict: "passes" | "blocked" | "open";
}

const RULES_OUT: readonly Zone[] = ["worse", "too-small", "no-worthwhile-gain"];
const ENOUGH: Readonly<Record<Plan["decision"]["adoptWhen"], readonly Zone[]>> = {
  "shown-better": ["worthwhile", "better"],
  "shown-worthwhile": ["worthwhile"],
};

/** The rule for one variant, with all primaries required or any one of them enough (METHODS 2, Conclusion). */
export function verdictOn(plan: Plan, variant: string, effects: readonly Effect[]): Verdict {
  const mine = effects.filter((effect) => effect.variant === variant);
  const primaries = mine.filter((effect) => effect.role === "primary");
  const guardrails = mine.filter((effect) => effect.role === "guardrail");
  return { variant, primaries, guardrails, verdict: verdict() };

  function verdict(): Verdict["verdict"] {
    if (primariesPass(plan, primaries) && guardrails.every(({ zone }) => zone === "within")) return "passes";
    if (ruledOutBy(plan, primaries).length > 0 || guardrails.some(({ zone }) => zone === "beyond")) return "blocked";
    return "open";
  }
}

/** Whether any one primary is enough, where there are several. */
export function anyIsEnough({ decision, metrics }: Plan): boolean {
  return decision.primaries === "any" && metrics.filter(({ role }) => role === "primary").length > 1;
}

export function primariesPass(plan: Plan, primaries: readonly Effect[]): boolean {
  const enough = primaries.filter((effect) => isEnough(plan, effect));
  if (!anyIsEnough(plan)) return enough.length === primaries.length;
  return enough.length > 0 && primaries.every(({ zone }) => zone !== "worse");
}

/** The primaries that block a variant: the first one ruled out; where any is enough the first that is worse, else all. */
export function ruledOutBy(plan: Plan, primaries: readonly Effect[]): readonly Effect[] {
  const out = primaries.filter(isRuledOut);
  if (!anyIsEnough(plan)) return out.slice(0, 1);
  const worse = out.filter(({ zone }) => zone === "worse");
  if (worse.length > 0) return worse.slice(0, 1);
  return out.length === primaries.length ? out : [];
}

export function isEnough(plan: Plan, primary: Effect): boolean {
  return ENOUGH[plan.decision.adoptWhen].includes(primary.zone);
}

function isRuledOut(primary: Effect): boolean {
  return RULES_OUT.includes(primary.zone);
}
