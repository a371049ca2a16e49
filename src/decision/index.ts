// the rule

// why a figure does not exist, to follow "since"
export { because } from "./absent.ts";
// what was found, in sentences that page, terminal and summary share
export { askedSentence } from "./asked.ts";
export { conclusion } from "./conclusion.ts";
export { controlOf, effects } from "./effects.ts";
// which interval of an effect a reader sees, and what the plan asks in words
export { absolute, amountText, type Measure, measure, metricOf, ruleInWords, signedRule } from "./measure.ts";
export { nextSentences, untilThen, whatWouldSettle, whyNotSettled } from "./next.ts";
// what quantiles need of the units
export { type ValuesAt, withOrderStatistics } from "./order-statistics.ts";
// types
export type { Conclusion, DecisionWord, Effect, Zone } from "./types.ts";
export { absoluteSentence, effectSentence, guardrailSentence } from "./words.ts";
export { placed, ruleOf } from "./zones.ts";
