import type { Reduction } from "../engine/types.ts";
import type { Incident, Plan } from "../plan/types.ts";
import type { ChoiceName, ChoiceRow } from "./choice-rows.ts";
import { type Decided, decided } from "./decided.ts";
import { deciding } from "./deciding.ts";
import type { Choices } from "./other-choices.ts";
import type { Conclusion, Effect } from "./types.ts";

/** What would come of the decision without the units that enrolled during an incident. */
export interface IncidentOutcome {
  readonly incident: Incident;
  /** Counted units that enrolled during it, by variant in plan order. */
  readonly units: readonly number[];
  /** Null where there is nothing to tell: nobody counted enrolled during it, a group is left with nobody, or no decision. */
  readonly without: Pick<Decided, "decision" | "variant"> | null;
  /** Whether that is another decision than the report's. */
  readonly isOther: boolean;
  /** Metrics that take part in the decision and stand elsewhere without it. */
  readonly elsewhere: readonly string[];
}

/** One an incident, in plan order: the plan's rule applied to the contrasts of that other choice, all else as planned. */
export function incidentOutcomes(
  plan: Plan,
  effects: readonly Effect[],
  choices: readonly Choices[],
  conclusion: Conclusion,
  { facts }: Pick<Reduction, "facts">,
): IncidentOutcome[] {
  return plan.incidents.map((incident, k) => {
    const choice: ChoiceName = `without-incident:${incident.name}`;
    const rows = effects.map((effect) => rowOf(choices, effect, choice));
    const hasRows = rows.some((row) => row !== null) && conclusion.decision !== "undecidable";
    const without = hasRows
      ? decided(
          plan,
          effects.map((effect, i) => under(effect, rows[i] ?? null)),
        )
      : null;
    const takesPart = effects.filter((effect, i) => effect.role !== "secondary" && rows[i]?.agrees === false);
    return {
      incident,
      units: facts.inIncidents[k] ?? [],
      without: without === null ? null : { decision: without.decision, variant: without.variant },
      isOther: without !== null && (without.decision !== conclusion.decision || without.variant !== conclusion.variant),
      elsewhere: hasRows ? [...new Set(takesPart.map(({ metric }) => metric))] : [],
    };
  });
}

function rowOf(choices: readonly Choices[], { metric, variant }: Effect, choice: ChoiceName): ChoiceRow | null {
  const own = choices.find((one) => one.metric === metric && one.variant === variant);
  return own?.rows.find((row) => row.choice === choice) ?? null;
}

/** The effect as if the plan had made this choice; as it is where the choice changes nothing of it. */
function under(effect: Effect, row: ChoiceRow | null): Effect {
  if (row === null || row.zone === null) return effect;
  const own = deciding(effect);
  const contrast = { ...own, difference: { ...own.difference, ...row.difference } };
  return { ...effect, adjusted: null, zone: row.zone, contrast };
}
