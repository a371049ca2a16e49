import type { Arm, CovariateArm } from "../cells/index.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { adjusted, armFigures, armOfLevel, contrast, isAbsent, shapedAs } from "../stats/index.ts";
import type { Absent, Contrast } from "../stats/types.ts";
import { type Compared, comparedContrast } from "./compared.ts";
import { criticalOf, variancesOfPairs } from "./critical.ts";

/** The two arms of a contrast, or why there are none to compare. */
export type TwoArms = { readonly control: Arm; readonly variant: Arm } | Absent;

/** The arms of one contrast, adjusted by the slope of the very units that a choice counts. */
export function adjustedTwoArms(
  summary: "mean" | "proportion",
  control: CovariateArm | undefined,
  variant: CovariateArm | undefined,
): TwoArms {
  if (control === undefined || variant === undefined) return { absent: "no-covariate" };
  const found = adjusted(control, variant);
  if (isAbsent(found)) return found;
  const absent = [found.control, found.variant].map(({ variance }) => variance).find(isAbsent);
  if (absent !== undefined) return absent;
  return { control: armOfLevel(summary, found.control), variant: armOfLevel(summary, found.variant) };
}

/** The critical value that the contrasts of one metric take together; what cannot be compared makes it Bonferroni's. */
export function criticalOfTwoArms(plan: Plan, metric: Metric, all: readonly TwoArms[]): number {
  const found = all.flatMap((two) => (isAbsent(two) ? [] : [two]));
  const { control, variants } = variancesOfPairs(found);
  return criticalOf(plan, metric, { control, variants: [...variants, ...all.slice(found.length).map(() => 0)] });
}

/**
 * The contrasts of one metric by the plan's own rule of methods; null where there is nothing to compare. What a correction
 * for skewness needs and a choice's sums do not tell, the shape of scores and of adjusted values and how far the arms look
 * alike, is the plan's own.
 * @param own the arms that the plan compares, in the same order; null where a quantity has no counterpart in them
 */
export function contrastsAsPlanned(
  plan: Plan,
  metric: Metric,
  all: readonly TwoArms[],
  own: readonly Compared[] | null,
): (Contrast | null)[] {
  const critical = criticalOfTwoArms(plan, metric, all);
  return all.map((two, i) => {
    if (isAbsent(two)) return null;
    const planned = own?.[i] ?? null;
    if (planned === null) return contrast(two.control, two.variant, critical);
    const compared = {
      control: shapedAs(two.control, armFigures(planned.control)),
      variant: shapedAs(two.variant, armFigures(planned.variant)),
      buckets: planned.buckets,
    };
    return comparedContrast(plan, compared, critical);
  });
}
