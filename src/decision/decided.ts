import type { Plan } from "../plan/types.ts";
import { deciding } from "./deciding.ts";
import { metricOf } from "./measure.ts";
import { type Verdict, verdictOn } from "./rule.ts";
import type { DecisionWord, Effect } from "./types.ts";
import { turned } from "./zones.ts";

/** What the plan's rule makes of the effects, where the data can decide at all. */
export interface Decided {
  readonly decision: Exclude<DecisionWord, "undecidable">;
  /** The adopted variant, else null. */
  readonly variant: string | null;
  /** One a variant, in plan order. */
  readonly verdicts: readonly Verdict[];
  /** Those that pass, the best first. */
  readonly passing: readonly Verdict[];
}

/** The rule without words (METHODS 2, Conclusion). */
export function decided(plan: Plan, effects: readonly Effect[]): Decided {
  const variants = plan.variants.filter((variant) => !variant.isControl);
  const verdicts = variants.map(({ name }) => verdictOn(plan, name, effects));
  const passing = bestFirst(
    plan,
    verdicts.filter(({ verdict }) => verdict === "passes"),
  );
  const [best] = passing;
  if (best !== undefined) return { decision: "adopt", variant: best.variant, verdicts, passing };
  const blocked = verdicts.every(({ verdict }) => verdict === "blocked");
  return { decision: blocked ? "keep-control" : "not-settled", variant: null, verdicts, passing };
}

/** By the estimate on the first primary, signs turned; the sort is stable, so a tie keeps the plan's order. */
function bestFirst(plan: Plan, verdicts: readonly Verdict[]): Verdict[] {
  return [...verdicts].sort((a, b) => {
    const [of, other] = [gainOn(plan, a), gainOn(plan, b)];
    return of === other ? 0 : other - of;
  });
}

/** Last of all where it has no estimate, which only happens where another primary is enough. */
export function gainOn(plan: Plan, { primaries: [first] }: Verdict): number {
  if (first === undefined) throw new Error("a plan came here without a primary");
  const { estimate } = deciding(first).difference;
  if (estimate === null) return Number.NEGATIVE_INFINITY;
  return turned(metricOf(first, plan), { low: estimate, high: estimate }).low ?? estimate;
}
