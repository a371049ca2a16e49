import type { ContrastFigures } from "../checks/types.ts";
import type { Plan } from "../plan/types.ts";
import {
  type Counts,
  DRAWS,
  DRAWS_OF_SECONDARY,
  isAbsent,
  normality,
  type Resampled,
  resampled,
} from "../stats/index.ts";
import type { ArmFigures } from "../stats/types.ts";
import type { Buckets } from "./buckets.ts";
import { type Compared, contrastWith } from "./compared.ts";
import { deciding } from "./deciding.ts";
import type { ContrastNormality, Effect } from "./types.ts";

/**
 * How good the normal approximation is for the contrast that decides, what the other interval says, and what drawing and
 * dealing its buckets says (METHODS 3).
 * @param compared the arms of that contrast
 * @param critical on the normal's scale
 * @param units all analysed units of all arms
 */
export function withNormality(effect: Effect, plan: Plan, compared: Compared, critical: number, units: number): Effect {
  const { control, variant, buckets } = compared;
  if (buckets === null) return effect;
  const { estimate, standardError } = deciding(effect).difference;
  const found = normality(control, variant, critical, buckets.alike, units);
  const draws = effect.role === "secondary" ? DRAWS_OF_SECONDARY : DRAWS;
  return {
    ...effect,
    normality: isAbsent(found) ? null : { ...found, critical, other: otherContrast(effect, plan, compared, critical) },
    resampled:
      estimate === null || standardError === null
        ? null
        : { ...drawnOf(buckets, { estimate, standardError }, critical, draws, sharesOf(effect)), critical },
  };
}

/** Drawn from the buckets; where they are gone, what was drawn before for the same critical value. */
function drawnOf(
  { cells, drawn, numbers }: Buckets,
  difference: { readonly estimate: number; readonly standardError: number },
  critical: number,
  draws: number,
  shares: Parameters<typeof resampled>[5],
): Resampled {
  if (cells !== null) return resampled(cells, difference, critical, draws, numbers, shares);
  if (drawn?.critical === critical) return drawn.found as Resampled;
  return { bootstrap: { notDrawn: "no-buckets" }, randomisation: { notDrawn: "no-buckets" } };
}

function otherContrast(
  effect: Effect,
  { decision }: Plan,
  compared: Compared,
  critical: number,
): ContrastNormality["other"] {
  const { method } = deciding(effect).difference;
  if (method === "skew-corrected") return contrastWith("normal", compared, critical);
  if (decision.interval === "skew-corrected" || (method !== "normal" && method !== "welch")) return null;
  const other = contrastWith("skew-corrected", compared, critical);
  return other.difference.method === "skew-corrected" ? other : null;
}

/** Of a proportion, also of an adjusted one, the counts. */
function sharesOf({ summary, contrast }: Effect): { readonly control: Counts; readonly variant: Counts } | null {
  if (summary !== "proportion") return null;
  const of = ({ units, total }: ArmFigures): Counts => ({ successes: total ?? 0, n: units });
  return { control: of(contrast.control), variant: of(contrast.variant) };
}

/** What the soundness checks look at, which come before the decision. */
export function contrastFigures(effect: Effect): ContrastFigures {
  const { metric, variant, control, normality } = effect;
  return { metric, variant, control, method: deciding(effect).difference.method, normality };
}
