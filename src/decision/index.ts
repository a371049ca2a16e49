// the rule

// why a figure does not exist, to follow "since"
export { because } from "./absent.ts";
// the effect as units enrolled
export { type Accrual, type AccrualDay, accruals, UNITS_FOR_ACCRUAL } from "./accrual.ts";
// what is adjusted for
export { adjustedSentence, covariateInWords } from "./adjusted-words.ts";
// what was found, in sentences that page, terminal and summary share
export { askedSentence } from "./asked.ts";
// what the cells by bucket say of two arms
export { bucketsOf } from "./buckets.ts";
// the same contrasts under other reasonable choices
export type { ChoiceName, ChoiceRow } from "./choice-rows.ts";
export { conclusion } from "./conclusion.ts";
// what adjusted contrasts need of the units
export { type AdjustedCells, adjustedPairs, type Pair } from "./covariates.ts";
// which contrast the rule is held against
export { deciding } from "./deciding.ts";
export { controlOf, effects } from "./effects.ts";
// incidents
export { incidentSentences, incidentsInShort } from "./incident-words.ts";
export { type IncidentOutcome, incidentOutcomes } from "./incidents.ts";
// planned looks
export { atThisLook, lookAccount } from "./looks.ts";
export { lookSentences } from "./looks-words.ts";
// which interval of an effect a reader sees, and what the plan asks in words
export {
  absolute,
  amountText,
  type Measure,
  measure,
  metricOf,
  pointsText,
  ruleInWords,
  signedRule,
} from "./measure.ts";
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
export { contrastFigures, withDraws } from "./normality.ts";
export { otherIntervalSentence } from "./normality-words.ts";
// what quantiles need of the units
export { type ValuesAt, withOrderStatistics } from "./order-statistics.ts";
export { type Choices, otherChoices } from "./other-choices.ts";
// what figures are drawn of
export { isPictured } from "./pictured.ts";
export { analysedUnits, questionOf, questionOfNextTest } from "./power.ts";
export { anyIsEnough } from "./rule.ts";
export { askedOf, ruleSentences } from "./rule-words.ts";
export { foundSentence, paceInWords, sizeInWords, unsizedSentences } from "./settle.ts";
// the effect by day since enrolment
export { type DaysSince, daysSince, type Trend } from "./since-enrolment.ts";
// the size of a test to come, without any data
export { levelAt, type SizeAnswer, type SizeQuestion, sizeAhead } from "./size-ahead.ts";
// the effect by subgroup
export { heterogeneitySentence, levelHead, levelSentence, levelText, ofLevel } from "./subgroup-words.ts";
export { type Subgroup, type SubgroupLevel, subgroups, UNITS_FOR_LEVEL } from "./subgroups.ts";
// what would change the conclusion
export { type Turn, whatWouldChange } from "./turning.ts";
// types
export type { AdjustedContrast, Conclusion, ContrastNormality, DecisionWord, Effect, Power, Zone } from "./types.ts";
export { absoluteSentence, effectSentence, guardrailSentence } from "./words.ts";
export { placed, ruleOf } from "./zones.ts";
