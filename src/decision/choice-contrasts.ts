import type { Arm, CovariateArm } from "../cells/index.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { adjusted, armOfLevel, contrast, isAbsent } from "../stats/index.ts";
import type { Absent, Contrast } from "../stats/types.ts";
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

/** The contrasts of one metric by the plan's own rule of methods; null where there is nothing to compare. */
export function contrastsAsPlanned(plan: Plan, metric: Metric, all: readonly TwoArms[]): (Contrast | null)[] {
  const critical = criticalOfTwoArms(plan, metric, all);
  return all.map((two) => (isAbsent(two) ? null : contrast(two.control, two.variant, critical)));
}
