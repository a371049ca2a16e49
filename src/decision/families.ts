import type { Plan } from "../plan/types.ts";
import { benjaminiHochberg, holm } from "../stats/index.ts";
import { deciding } from "./deciding.ts";
import { pAtLook } from "./looks.ts";
import type { Effect } from "./types.ts";

/**
 * p adjusted over what takes several metrics at once (METHODS 2), where each primary and guardrail has its p over the
 * variants already: under `primaries: any` Holm's over the primaries of a variant, on those; Benjamini and Hochberg's over
 * all contrasts of secondary metrics. With planned looks they are adjusted for these first. Beside it Holm's p over the variants of a metric, under `any` of all primaries.
 */
export function withFamilies(plan: Plan, effects: readonly Effect[]): Effect[] {
  const anyIsEnough = plan.decision.primaries === "any";
  const several = plan.variants.length > 2;
  const pOf = (effect: Effect) => deciding(effect).difference.p;
  const pOfLook = (effect: Effect) => {
    const p = pOf(effect);
    return p === null ? null : pAtLook(plan, p);
  };
  const secondary = adjusted(effects, ({ role }) => (role === "secondary" ? "all" : null), pOf, benjaminiHochberg);
  const primaries = adjusted(
    effects,
    ({ role, variant }) => (anyIsEnough && role === "primary" ? variant : null),
    ({ pAdjusted }) => pAdjusted,
    holm,
  );
  const familyBeside = ({ role, metric }: Effect) => {
    if (!several || role === "secondary") return null;
    return anyIsEnough && role === "primary" ? role : `${role} ${metric}`;
  };
  const beside = adjusted(effects, familyBeside, pOfLook, holm);
  return effects.map((effect, i) => ({
    ...effect,
    pAdjusted: secondary[i] ?? primaries[i] ?? effect.pAdjusted,
    pHolm: beside[i] ?? null,
  }));
}

/** One p an effect, adjusted within its family; null where it is of none, or has no p. */
function adjusted(
  effects: readonly Effect[],
  familyOf: (effect: Effect) => string | null,
  pOf: (effect: Effect) => number | null,
  adjust: (ps: readonly (number | null)[]) => readonly (number | null)[],
): (number | null)[] {
  const families = new Set(effects.map(familyOf).filter((family) => family !== null));
  const found = new Map<Effect, number | null>();
  for (const family of families) {
    const members = effects.filter((effect) => familyOf(effect) === family);
    const ps = adjust(members.map(pOf));
    members.forEach((member, i) => {
      found.set(member, ps[i] ?? null);
    });
  }
  return effects.map((effect) => found.get(effect) ?? null);
}
