import { type AdjustedContrast, adjustedSentence, covariateInWords, type Effect } from "../../decision/index.ts";
import type { Metric, Plan } from "../../plan/types.ts";
import { alike, count, percent, plain, plural, pText, quoted } from "../../words/index.ts";

/** From how many times as many units on the saving is said in units; ours. */
const WORTH_SAYING = 1.05;

/** The same effect without its adjustment, to be shown beside it; null where it has none. */
export function unadjusted(effect: Effect): Effect | null {
  const { adjusted } = effect;
  return adjusted === null ? null : { ...effect, adjusted: null, pAdjusted: adjusted.pAdjustedOfPlain, pHolm: null };
}

/** What a metric is adjusted for, how, what it saves and how the covariate lies in the groups; of each effect one text. */
export function adjustedNotes(metric: Metric, plan: Plan, effects: readonly Effect[]): string[] {
  const covariate = covariateInWords(metric);
  if (covariate === null) return [];
  const texts = effects.map((effect) => {
    const who = plan.variants.length > 2 ? `With ${quoted(effect.variant)}. ` : "";
    if (effect.adjusted === null) return who + adjustedSentence(effect, plan);
    const { adjusted } = effect;
    return `${who}${slopeText(plan, covariate, adjusted)} ${savedText(plan, adjusted)} ${balanceText(effect, adjusted)}${missingText(plan, effect, adjusted)}`;
  });
  return [...new Set(texts)];
}

function slopeText(plan: Plan, covariate: string, { theta, centre }: AdjustedContrast): string {
  const [above, below] = theta < 0 ? ["more", "less"] : ["less", "more"];
  const size = digits(Math.abs(theta), 3);
  return `Adjusted for ${covariate}: for each 1 of it above the mean of both groups, ${digits(centre, 4)}, a ${plan.unitCalled.one}\u2019s value counts ${size} ${above}, and for each 1 below it ${size} ${below}.`;
}

/** So many significant digits, without zeros at the end. */
const digits = (value: number, many: number) => plain(Number(value.toPrecision(many)));

function savedText(plan: Plan, { varianceReduction }: AdjustedContrast): string {
  if (varianceReduction < 0.001) return "That takes away next to none of the variance of the difference.";
  const taken = `That takes away ${percent(varianceReduction)} of the variance of the difference`;
  const times = 1 / (1 - varianceReduction);
  if (times < WORTH_SAYING || varianceReduction === 1) return `${taken}.`;
  return `${taken}, as about ${digits(times, 2)} times as many ${plan.unitCalled.many} would.`;
}

function balanceText({ control, variant }: Effect, { balance }: AdjustedContrast): string {
  const { p } = balance;
  const means = [balance.variant.mean, balance.control.mean].filter((mean) => mean !== null);
  if (means.length < 2) return "";
  const [ofVariant, ofControl] = alike(means);
  const chance = p === null ? "" : ` (${pText(p)} for a difference)`;
  return `Its mean was ${ofVariant} with ${quoted(variant)} and ${ofControl} with ${quoted(control)}${chance}.`;
}

function missingText(plan: Plan, { control, variant }: Effect, { withoutCovariate }: AdjustedContrast): string {
  const all = withoutCovariate.control + withoutCovariate.variant;
  if (all === 0) return "";
  const { one, many } = plan.unitCalled;
  const by = `${count(withoutCovariate.control)} with ${quoted(control)}, ${count(withoutCovariate.variant)} with ${quoted(variant)}`;
  return ` ${plural(all, one, many)} without it ${all === 1 ? "counts" : "count"} with the mean of both groups: ${by}.`;
}
