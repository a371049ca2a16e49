import { type Arm, accumulated, type GroupSums, groupSums } from "../cells/index.ts";
import type { Level, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import {
  benjaminiHochberg,
  contrast,
  type Heterogeneity,
  heterogeneity,
  isAbsent,
  normalCritical,
} from "../stats/index.ts";
import type { Absent, Contrast } from "../stats/types.ts";
import type { Pair } from "./covariates.ts";
import { deciding } from "./deciding.ts";
import { partArms, type WholeArms, wholeArms } from "./group-contrasts.ts";
import type { Effect } from "./types.ts";

/** Under so many units in an arm a level is too small to tell anything; the limit is ours. */
export const UNITS_FOR_LEVEL = 50;

/** One effect by the levels of one column (METHODS 5). It suggests and never decides. */
export interface Subgroup {
  readonly column: string;
  readonly metric: string;
  readonly variant: string;
  /** In the order of `Facts.subgroups`. */
  readonly levels: readonly SubgroupLevel[];
  /** Over the levels that are large enough; null with fewer than two of them. */
  readonly heterogeneity: Heterogeneity | null;
}

export interface SubgroupLevel {
  readonly level: Level;
  /** Units with a value in each arm. */
  readonly units: { readonly control: number; readonly variant: number };
  /** Pointwise; without figures why there are none. */
  readonly contrast: Contrast | Absent;
  /** Over all levels of all columns, metrics and variants, Benjamini and Hochberg's. */
  readonly pAdjusted: number | null;
  readonly standing: Standing;
}

/**
 * Where a level stands to the whole: too few units to tell; against it, where its interval at alpha / levels excludes 0 on
 * the other side than the whole's estimate; else not against it, which does not say that it is with it.
 */
export type Standing = "too-few" | "against" | "not-against";

/**
 * Every effect by the levels of every subgroup column, the columns in plan order and within each the effects in theirs;
 * quantiles have none.
 * @param arms per metric, per variant, both in plan order
 * @param pairs the adjusted arms of metrics that the plan adjusts
 * @param asked which columns: those of the plan, or those that were asked afterwards; each are a family of their own
 */
export function subgroups(
  plan: Plan,
  { facts, groups }: Reduction,
  arms: readonly (readonly Arm[])[],
  pairs: readonly Pair[],
  effects: readonly Effect[],
  asked: "planned" | "afterwards" = "planned",
): Subgroup[] {
  const columns = asked === "planned" ? facts.subgroups : facts.subgroupsAfterwards;
  const first = asked === "planned" ? 0 : facts.subgroups.length;
  const found = columns.flatMap(({ column, levels }, s) =>
    plan.metrics.flatMap((metric, m) => {
      const cells = groups[m]?.byLevel[first + s];
      if (cells === undefined) return [];
      const parts = groupSums(cells, plan.variants.length);
      const all = accumulated(parts).at(-1);
      if (all === undefined) return [];
      return effects
        .filter((effect) => effect.metric === metric.name)
        .map((effect): Subgroup => {
          const whole = wholeArms(plan, effect, arms[m] ?? [], pairs, all);
          const rows = levels.map(({ level }, code) =>
            levelRow(plan, effect, whole, level, parts.find(({ group }) => group === code) ?? null, levels.length),
          );
          const { variant } = effect;
          return { column, metric: metric.name, variant, levels: rows, heterogeneity: betweenLevels(rows) };
        });
    }),
  );
  return withAdjustedP(found);
}

function levelRow(
  plan: Plan,
  effect: Effect,
  whole: WholeArms,
  level: Level,
  part: GroupSums | null,
  levels: number,
): SubgroupLevel {
  const units = {
    control: part?.arms[whole.control]?.value.n ?? 0,
    variant: part?.arms[whole.variant]?.value.n ?? 0,
  };
  const two = part === null ? ({ absent: "no-units" } as const) : partArms(whole, part);
  if (isAbsent(two)) return { level, units, contrast: two, pAdjusted: null, standing: "too-few" };
  const alpha = 1 - plan.decision.confidence;
  const own = contrast(two.control, two.variant, normalCritical(alpha));
  const wide = contrast(two.control, two.variant, normalCritical(alpha / levels));
  return { level, units, contrast: own, pAdjusted: null, standing: standing(effect, units, own, wide) };
}

function standing(effect: Effect, units: SubgroupLevel["units"], own: Contrast, wide: Contrast): Standing {
  const { low, high } = wide.difference;
  // With under 10 successes or failures in an arm the score interval counts; such a level says as little as a small one.
  const isFew = Math.min(units.control, units.variant) < UNITS_FOR_LEVEL || own.difference.method === "score";
  if (isFew || (low === null && high === null)) return "too-few";
  const estimate = deciding(effect).difference.estimate ?? 0;
  const isBelow = high !== null && high < 0;
  const isAbove = low !== null && low > 0;
  return (estimate > 0 && isBelow) || (estimate < 0 && isAbove) ? "against" : "not-against";
}

function betweenLevels(levels: readonly SubgroupLevel[]): Heterogeneity | null {
  return heterogeneity(
    levels.flatMap(({ contrast: own, standing: stands }) => {
      if (stands === "too-few" || isAbsent(own)) return [];
      const { estimate, standardError } = own.difference;
      return estimate === null || standardError === null || standardError === 0 ? [] : [{ estimate, standardError }];
    }),
  );
}

/** One family: every level of every column, metric and variant. */
function withAdjustedP(found: readonly Subgroup[]): Subgroup[] {
  const adjusted = benjaminiHochberg(
    found.flatMap(({ levels }) => levels.map(({ contrast: own }) => (isAbsent(own) ? null : own.difference.p))),
  );
  let next = 0;
  return found.map((subgroup) => ({
    ...subgroup,
    levels: subgroup.levels.map((level) => ({ ...level, pAdjusted: adjusted[next++] ?? null })),
  }));
}
