// the rule

// what was found, in sentences that page, terminal and summary share
export { askedSentence } from "./asked.ts";
export { conclusion } from "./conclusion.ts";
export { effects } from "./effects.ts";
export { nextSentences, untilThen, whatWouldSettle, whyNotSettled } from "./next.ts";
// types
export type { Conclusion, DecisionWord, Effect, Zone } from "./types.ts";
export { absoluteSentence, effectSentence, guardrailSentence } from "./words.ts";
export { placed } from "./zones.ts";
