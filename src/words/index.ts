// numbers

export { atLeast, casesText, spanText } from "./cases.ts";
export { chanceText, pCell, pText } from "./chance.ts";
// nouns and days
export { type Day, dateSpan, dateText, dayOfEpoch, daysText } from "./dates.ts";
export { exact } from "./exact.ts";
// estimates with their intervals
export {
  type Comparative,
  endInWords,
  endSize,
  estimateInWords,
  estimateSize,
  HIGHER,
  type Interval,
  intervalInWords,
  intervalSizes,
  MORE,
  type Scale,
  signedEstimate,
  signedInterval,
} from "./interval.ts";
export { asSentence, capital, list, plural, quoted } from "./nouns.ts";
export { alike, count, fixed, MINUS, number, plain, signed } from "./number.ts";
export { percent, planPercent, signedPercent } from "./percent.ts";
export { percentile } from "./percentile.ts";
export { type Rates, rates } from "./rate.ts";
export { NO_UNIT, rejectReason } from "./reasons.ts";
