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

/** The rule for one variant, with all primaries required (METHODS 2, Conclusion). */
export function verdictOn(plan: Plan, variant: string, effects: readonly Effect[]): Verdict {
  const mine = effects.filter((effect) => effect.variant === variant);
  const primaries = mine.filter((effect) => effect.role === "primary");
  const guardrails = mine.filter((effect) => effect.role === "guardrail");
  return { variant, primaries, guardrails, verdict: verdict() };

  function verdict(): Verdict["verdict"] {
    if (primaries.every((effect) => isEnough(plan, effect)) && guardrails.every(({ zone }) => zone === "within")) {
      return "passes";
    }
    if (primaries.some(isRuledOut) || guardrails.some(({ zone }) => zone === "beyond")) return "blocked";
    return "open";
  }
}

export function isEnough(plan: Plan, primary: Effect): boolean {
  return ENOUGH[plan.decision.adoptWhen].includes(primary.zone);
}

export function isRuledOut(primary: Effect): boolean {
  return RULES_OUT.includes(primary.zone);
}
