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
  seedOfCells,
  type ToDraw,
} from "../stats/index.ts";
import type { ArmFigures } from "../stats/types.ts";
import type { Buckets } from "./buckets.ts";
import { type Compared, contrastWith } from "./compared.ts";
import { deciding } from "./deciding.ts";
import { isPictured } from "./pictured.ts";
import type { ContrastNormality, Effect } from "./types.ts";

/**
 * How good the normal approximation is for the contrast that decides, what the other interval says, and what is to be drawn
 * and dealt of its buckets (METHODS 3).
 * @param compared the arms of that contrast
 * @param critical on the normal's scale
 * @param units all analysed units of all arms
 */
export function withNormality(effect: Effect, plan: Plan, compared: Compared, critical: number, units: number): Effect {
  const { control, variant, buckets } = compared;
  if (buckets === null) return effect;
  const { estimate, standardError } = deciding(effect).difference;
  const found = normality(control, variant, critical, buckets.alike, units);
  const own = {
    ...effect,
    normality: isAbsent(found) ? null : { ...found, critical, other: otherContrast(effect, plan, compared, critical) },
  };
  if (estimate === null || standardError === null) return own;
  const { cells, numbers } = buckets;
  if (cells === null) return { ...own, resampled: { ...drawnBefore(buckets, critical), critical } };
  const toDraw: ToDraw = {
    cells,
    difference: { estimate, standardError },
    critical,
    draws: effect.role === "secondary" ? DRAWS_OF_SECONDARY : DRAWS,
    seed: seedOfCells(numbers),
    shares: sharesOf(effect),
    isPictured: isPictured(effect, plan.metrics.length * (plan.variants.length - 1)),
  };
  return { ...own, toDraw };
}

/** Where the buckets are gone, what was drawn from them for the same critical value. */
function drawnBefore({ drawn }: Buckets, critical: number): Resampled {
  if (drawn?.critical === critical) return drawn.found as Resampled;
  return { bootstrap: { notDrawn: "no-buckets" }, randomisation: { notDrawn: "no-buckets" } };
}

/** Effects with what was drawn for them, in their order; `draw` may be another thread's. */
export async function withDraws(
  effects: readonly Effect[],
  draw: (toDraw: ToDraw) => Resampled | Promise<Resampled> = resampled,
): Promise<Effect[]> {
  return Promise.all(
    effects.map(async (effect) => {
      const { toDraw } = effect;
      if (toDraw === null) return effect;
      return { ...effect, toDraw: null, resampled: { ...(await draw(toDraw)), critical: toDraw.critical } };
    }),
  );
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
function sharesOf({ summary, contrast }: Effect): ToDraw["shares"] {
  if (summary !== "proportion") return null;
  const of = ({ units, total }: ArmFigures): Counts => ({ successes: total ?? 0, n: units });
  return { control: of(contrast.control), variant: of(contrast.variant) };
}

/** What the soundness checks look at, which come before the decision. */
export function contrastFigures(effect: Effect): ContrastFigures {
  const { metric, variant, control, normality } = effect;
  return { metric, variant, control, method: deciding(effect).difference.method, normality };
}
