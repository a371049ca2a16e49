// the rule

// why a figure does not exist, to follow "since"
export { because } from "./absent.ts";
// what is adjusted for
export { adjustedSentence, covariateInWords } from "./adjusted-words.ts";
// what was found, in sentences that page, terminal and summary share
export { askedSentence } from "./asked.ts";
// the same contrasts under other reasonable choices
export type { ChoiceName, ChoiceRow } from "./choice-rows.ts";
export { conclusion } from "./conclusion.ts";
// what adjusted contrasts need of the units
export { type AdjustedCells, adjustedPairs, type Pair } from "./covariates.ts";
// which contrast the rule is held against
export { deciding } from "./deciding.ts";
export { controlOf, effects } from "./effects.ts";
// which interval of an effect a reader sees, and what the plan asks in words
export { absolute, amountText, type Measure, measure, metricOf, ruleInWords, signedRule } from "./measure.ts";
export { nextSentences, untilThen, whyNotSettled } from "./next.ts";
// how large a next test is to be
export {
  enrolledADay,
  type NextTest,
  nextTest,
  plannedADay,
  type Size,
  type Sized,
  type Unsized,
} from "./next-test.ts";
// how good the normal approximation is
export { contrastFigures } from "./normality.ts";
export { otherIntervalSentence } from "./normality-words.ts";
// what quantiles need of the units
export { type ValuesAt, withOrderStatistics } from "./order-statistics.ts";
export { type Choices, otherChoices } from "./other-choices.ts";
export { analysedUnits, questionOf } from "./power.ts";
export { anyIsEnough } from "./rule.ts";
export { askedOf, ruleSentences } from "./rule-words.ts";
export { foundSentence, paceInWords, sizeInWords, unsizedSentences } from "./settle.ts";
// what would change the conclusion
export { type Turn, whatWouldChange } from "./turning.ts";
// types
export type { AdjustedContrast, Conclusion, ContrastNormality, DecisionWord, Effect, Power, Zone } from "./types.ts";
export { absoluteSentence, effectSentence, guardrailSentence } from "./words.ts";
export { placed, ruleOf } from "./zones.ts";
