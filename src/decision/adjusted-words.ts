import type { Metric, Plan } from "../plan/types.ts";
import { plural, quoted } from "../words/index.ts";
import { because } from "./absent.ts";
import { metricOf } from "./measure.ts";
import type { Effect } from "./types.ts";

/** What a metric is adjusted for: "the same in the 14 days before enrolment", '"past_fares" at enrolment'; null for nothing. */
export function covariateInWords({ adjustFor }: Metric): string | null {
  if (adjustFor === null) return null;
  return adjustFor.kind === "column"
    ? `${quoted(adjustFor.column)} at enrolment`
    : `the same in the ${plural(adjustFor.days, "day", "days")} before enrolment`;
}

/** Said after an effect of a metric that the plan adjusts: that it is, or why not. "" where the plan does not. */
export function adjustedSentence(effect: Effect, plan: Plan): string {
  const covariate = covariateInWords(metricOf(effect, plan));
  if (covariate === null) return "";
  if (effect.adjusted !== null) return `Adjusted for ${covariate}.`;
  if (effect.notAdjusted === null) return "";
  const { one, many } = plan.unitCalled;
  return `Not adjusted for ${covariate}, since ${because(effect.notAdjusted.absent, one, many)}.`;
}
