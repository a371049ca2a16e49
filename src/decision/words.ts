import type { Plan } from "../plan/types.ts";
import { count, estimateInWords, type Interval, intervalInWords, MORE, quoted, type Scale } from "../words/index.ts";
import { because } from "./absent.ts";
import { adjustedSentence } from "./adjusted-words.ts";
import { deciding } from "./deciding.ts";
import { levelsInWords } from "./levels.ts";
import { absolute, amountText, counts, measure, metricOf, ruleInWords } from "./measure.ts";
import { intervalLabel, told, unmeasured } from "./told.ts";
import type { Effect } from "./types.ts";
import { ruleOf, turned } from "./zones.ts";

/** What was found: 'Booked: 13.2 of 100 visitors with "calendar" and 12.0 with "list", 10.0% more (95% interval: …).' */
export function effectSentence(effect: Effect, plan: Plan): string {
  const levels = levelsInWords(effect, plan);
  const texts = told(effect, plan);
  const { one, many } = plan.unitCalled;
  if (texts !== null && levels !== null) {
    return `${effect.metric}: ${levels}, ${texts.found}.${withoutRelative(effect, plan)}${afterwards(effect, plan)}`;
  }
  const reason = because(deciding(effect).why?.absent ?? "not-built", one, many);
  return levels === null
    ? `${effect.metric}: nothing can be compared, since ${reason}.`
    : `${effect.metric}: ${levels}. No interval can be given, since ${reason}.`;
}

/** Whether the figures are adjusted, as a sentence to follow them. */
function afterwards(effect: Effect, plan: Plan): string {
  const sentence = adjustedSentence(effect, plan);
  return sentence === "" ? "" : ` ${sentence}`;
}

/** Said where a share of the control's level was wanted and does not exist. */
function withoutRelative(effect: Effect, plan: Plan): string {
  const { relative } = deciding(effect);
  if (ruleOf(metricOf(effect, plan))?.kind === "absolute" || !("absent" in relative)) return "";
  return ` No percentage is given, since ${because(relative.absent, plan.unitCalled.one, plan.unitCalled.many)}.`;
}

/** "Must not get worse: Support contacts, limit 5% more. Found …: 1.2% fewer (95% interval: …). Within the limit." */
export function guardrailSentence(effect: Effect, plan: Plan): string {
  const metric = metricOf(effect, plan);
  const rule = ruleOf(metric);
  const limit = rule === null ? "" : `, limit ${ruleInWords(metric, rule)}`;
  const texts = told(effect, plan);
  const reason = unmeasured(effect, plan);
  const found = texts === null ? "" : ` Found with ${texts.variant}: ${texts.found}.${afterwards(effect, plan)}`;
  return `Must not get worse: ${effect.metric}${limit}.${found} ${verdict()}`;

  function verdict(): string {
    if (effect.zone === "within")
      return surelyWorse(effect, plan)
        ? "Within the limit, though the whole interval is on the worse side."
        : "Within the limit.";
    if (effect.zone === "beyond") return "Beyond the limit.";
    return reason === null
      ? `Not settled: ${notRuledOut(effect, plan)}.`
      : `Not settled with ${quoted(effect.variant)}, since ${reason}.`;
  }
}

/** "a rise of Support contacts by more than 5% cannot be ruled out". */
export function notRuledOut(effect: Effect, plan: Plan): string {
  const metric = metricOf(effect, plan);
  const rule = ruleOf(metric);
  const way = metric.goodIs === "lower" ? "a rise" : "a fall";
  return `${way} of ${effect.metric} by more than ${rule === null ? "its limit" : amountText(metric, rule)} cannot be ruled out`;
}

/** A guardrail whose whole interval is harm, though inside its limit. */
export function surelyWorse(effect: Effect, plan: Plan): boolean {
  const { interval } = measure(effect, plan);
  if (effect.role !== "guardrail" || effect.zone !== "within" || interval === null) return false;
  const { high } = turned(metricOf(effect, plan), interval);
  return high !== null && high < 0;
}

/**
 * The absolute amount beside a relative one: 'Booked: for every 1,000 visitors with "calendar" instead of "list" about 12 more
 * (95% interval: 8 to 16 more).' It stands apart from the relative one, so it names its measure. Null where the sentence of the effect gives the absolute amount already.
 */
export function absoluteSentence(effect: Effect, plan: Plan): string | null {
  const metric = metricOf(effect, plan);
  const { interval, scale, words } = absolute(effect, metric);
  const comparative = counts(metric) ? MORE : words;
  if (measure(effect, plan).scale.kind !== "percent" || interval === null || interval.estimate === 0) return null;
  const label = intervalLabel(plan);
  const write = (shown: Interval, as: Scale) =>
    `${estimateInWords(shown, as, comparative)} (${label}: ${intervalInWords(shown, as, comparative)})`;
  if (!counts(metric)) return `${metric.name}: that is ${write(interval, scale)}.`;
  const many = enough(interval);
  return `${metric.name}: for every ${count(many)} ${plan.unitCalled.many} with ${quoted(effect.variant)} instead of ${quoted(effect.control)} about ${write(times(interval, many), { kind: "amount", unit: null, places: 0 })}.`;
}

/** 1,000, or the power of ten at which both ends are told from 0 and from each other in whole numbers; at most 10^6. */
function enough({ estimate, low, high }: Interval): number {
  const smallest = Math.min(...[estimate, low, high].map((value) => Math.abs(value ?? 0)).filter((size) => size > 0));
  return [1e3, 1e4, 1e5].find((many) => smallest * many >= 1) ?? 1e6;
}

function times({ estimate, low, high }: Interval, many: number): Interval {
  return { estimate: estimate * many, low: low === null ? null : low * many, high: high === null ? null : high * many };
}
