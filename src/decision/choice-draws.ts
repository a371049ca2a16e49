import type { Metric } from "../plan/types.ts";
import { isAbsent, isNotDrawn, level, normalUpperTail, relativeOfInterval } from "../stats/index.ts";
import type { TwoArms } from "./choice-contrasts.ts";
import { type ChoiceRow, onlyP, row } from "./choice-rows.ts";
import { deciding } from "./deciding.ts";
import type { Effect } from "./types.ts";

/** The same arms by their shapes, and by drawing and dealing their buckets; what was not drawn is not listed. */
export function byShapesAndDraws(effect: Effect, metric: Metric, two: TwoArms): ChoiceRow[] {
  const { normality, resampled } = effect;
  const other = normality?.other ?? null;
  const corrected = other?.difference.method === "skew-corrected" ? [row("skew-corrected", other, effect, metric)] : [];
  return resampled === null || normality === null
    ? corrected
    : [
        ...corrected,
        ...bootstrapRow(effect, metric, two),
        ...dealtRow(effect, 2 * normalUpperTail(normality.critical)),
      ];
}

function bootstrapRow(effect: Effect, metric: Metric, two: TwoArms): ChoiceRow[] {
  const bootstrap = effect.resampled?.bootstrap;
  if (bootstrap === undefined || isNotDrawn(bootstrap) || isAbsent(two)) return [];
  const [control, variant] = [level(two.control), level(two.variant)];
  if (isAbsent(control) || isAbsent(variant)) return [];
  const { difference } = deciding(effect);
  const { low, high } = bootstrap;
  const relative = relativeOfInterval(control, variant, bootstrap);
  return [row("bootstrap-t", { difference: { ...difference, low, high, p: null }, relative }, effect, metric)];
}

function dealtRow(effect: Effect, alpha: number): ChoiceRow[] {
  const dealt = effect.resampled?.randomisation;
  const { estimate } = deciding(effect).difference;
  if (dealt === undefined || isNotDrawn(dealt) || estimate === null) return [];
  return [onlyP("randomisation", estimate, dealt.p, alpha, effect)];
}
