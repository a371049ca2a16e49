import type { Reduction } from "../engine/types.ts";
import type { Plan, Role } from "../plan/types.ts";
import { atLeast, casesText, list, planPercent, spanText } from "../words/index.ts";
import { amountText, metricOf, ruleInWords } from "./measure.ts";
import { nextTest, type Size, type Sized, type Unsized } from "./next-test.ts";
import { analysedUnits } from "./power.ts";
import type { Effect } from "./types.ts";
import { ruleOf } from "./zones.ts";

/**
 * "What would settle it: a new test with 46,600 visitors in each variant, 5 weeks of enrolment at this pace. It finds a
 * gain of 5% in Booked in 4 of 5 cases."
 */
export function whatWouldSettle(plan: Plan, effects: readonly Effect[], reduction: Reduction): string {
  const start = "What would settle it: a new test with";
  const { size, unsized } = nextTest(plan, effects, reduction);
  if (size === null) {
    const why = unsized.length > 0 ? unsizedSentences(plan, unsized) : ["The plan states no amount to size it for."];
    return [`${start} more ${plan.unitCalled.many}.`, ...why].join(" ");
  }
  const enough =
    size.units <= analysedUnits(reduction)
      ? ["That is no more than were counted here: an effect near the limit can stay unsettled in a test of any size."]
      : [];
  const sized = [`${start} ${sizeInWords(plan, size)}${paceInWords(size)}.`, foundSentence(plan, size)];
  return [...sized, ...enough, ...unsizedSentences(plan, unsized)].join(" ");
}

/** "46,600 visitors in each variant", "139,000 visitors in all, shared out as in this test". */
export function sizeInWords({ unitCalled }: Plan, { units, perArm }: Size): string {
  return perArm === null
    ? `${atLeast(units)} ${unitCalled.many} in all, shared out as in this test`
    : `${atLeast(perArm)} ${unitCalled.many} in each variant`;
}

export function paceInWords({ days }: Size): string {
  return days === null ? "" : `, ${spanText(days)} of enrolment at this pace`;
}

const MOST_QUESTIONS = 3; // more of them, each with its chance, nobody reads

/** What a test of that size finds, and how often: each question, and all together where there are several. */
export function foundSentence(plan: Plan, { sized, together }: Size): string {
  const several = sized.length > MOST_QUESTIONS;
  const told = (role: Role) =>
    sized
      .filter(({ effect }) => effect.role === role)
      .map((one) => questionInWords(plan, one) + (several ? "" : ` in ${casesText(one.power)} cases`));
  const [gains, limits] = [told("primary"), told("guardrail")];
  const kept = limits.length === 0 ? "" : `, where nothing changes, ${list(limits)}`;
  const each = gains.length === 0 ? kept : `${several ? ":" : ""} ${list(gains)}${kept === "" ? "" : ` and${kept}`}`;
  const start = several ? `It finds each of these in ${casesText(plan.decision.power)} cases or more` : "It finds";
  const all = sized.length === 1 || together < 0.01 ? "" : `; all of it together in at least ${casesText(together)}`;
  return `${start}${each}${all}.`;
}

/** "a gain of 5% in Booked", "Support contacts within its limit of 5% more". */
function questionInWords(plan: Plan, { effect }: Sized): string {
  const metric = metricOf(effect, plan);
  const rule = ruleOf(metric);
  if (rule === null) throw new Error(`a size for ${metric.name}, of which the plan asks no amount`);
  if (metric.role === "guardrail") return `${metric.name} within its limit of ${ruleInWords(metric, rule)}`;
  const gain = metric.goodIs === "higher" ? "a gain" : "a fall";
  if (plan.decision.adoptWhen === "shown-better" || metric.expected === null)
    return `${gain} of ${amountText(metric, rule)} in ${metric.name}`;
  return `${gain} beyond ${amountText(metric, rule)} in ${metric.name}, if it is the ${amountText(metric, metric.expected)} that the plan expects,`;
}

/** Of metrics that no size can be told for, why, one sentence each. */
export function unsizedSentences(plan: Plan, unsized: readonly Unsized[]): string[] {
  const sentences = unsized.map(({ effect, why }) => {
    const metric = metricOf(effect, plan);
    const rule = ruleOf(metric);
    if (metric.quantile !== null) return `For ${metric.name} no size is computed, since it is a quantile.`;
    if (why === null || rule === null) return `For ${metric.name} these data tell no size.`;
    const amount = amountText(metric, rule);
    const chance = `${planPercent((1 - plan.decision.confidence) / 2)} of tests at most`;
    return `For ${metric.name} no size helps: the plan adopts on a gain proven to go beyond ${amount} and expects none larger, and a gain of just ${amount} is proven so in ${chance}, however large they are.`;
  });
  return [...new Set(sentences)];
}
