import type { LargestShare, NotDrawn, Tails } from "../stats/index.ts";
import { count, fixed, percent, quoted } from "../words/index.ts";

/** What the plan calls its units. */
interface Called {
  readonly one: string;
  readonly many: string;
}

/** The skew-corrected interval as a text, and whether the rule applied to it concludes the same. */
export interface CorrectedTold {
  readonly interval: string;
  readonly conclusion: "stays" | "changes";
}

type Shown = Pick<Tails, "nominal" | "reported" | "level">;

/**
 * "The nominal 2.5% tails are about 3.4% below the truth and 1.6% above it; the corrected interval is +5.8% to +13.9%; the
 * conclusion stays." Where the tails are near: that they are.
 */
export function tailsSentence({ nominal, reported, level }: Shown, corrected: CorrectedTold | null): string {
  const [both, below, above] = [nominal, reported.lowerTail, reported.upperTail].map((tail) => tailText(tail, nominal));
  const found = `The nominal ${both} tails are about ${below} below the truth and ${above} above it`;
  if (level === "near") return `${found}: the normal approximation is good enough here.`;
  const severe = level === "strong" ? `${found}, so the interval cannot be taken at its word` : found;
  return corrected === null
    ? `${severe}.`
    : `${severe}; the corrected interval is ${corrected.interval}; the conclusion ${corrected.conclusion}.`;
}

/** Where the units of the arms are spread in different ways, so that one shape for both says little. */
export function shapesSentence(
  { pooled, own, nominal }: Pick<Tails, "pooled" | "own" | "nominal">,
  { many }: Called,
): string {
  const text = (tail: number) => tailText(tail, nominal);
  const pair = (tails: Tails["own"]) => `${text(tails.lowerTail)} and ${text(tails.upperTail)}`;
  return `The ${many} of the two groups are spread in different ways: with each group's own shape the tails are ${pair(own)}, with one shape for both ${pair(pooled)}.`;
}

/** What can be done about tails that are off, or shapes that differ. */
export const TAILS_REMEDY =
  "Read the corrected interval, and give the metric a cap in the plan of the next test: a few very large values make the difference.";

/** One unit that holds much of an arm's spread; null where none does. */
export function largestShareSentence(share: LargestShare, variant: string, { one, many }: Called): string | null {
  if (share.level === "near") return null;
  const found = `One ${one} with ${quoted(variant)} holds ${percent(share.ofSquares)} of the spread of all of them`;
  return share.level === "strong"
    ? `${found}: whether this metric has a variance at all is doubtful, and no number of ${many} would make its interval right without a cap.`
    : `${found}: that is much for one ${one}, and the interval leans on it.`;
}

/** The remedy of `largestShareSentence`. */
export const LARGEST_SHARE_REMEDY = "Give the metric a cap in the plan of the next test, such as its 0.999 quantile.";

/**
 * From how many units on the tails would be near; null "cannot be told".
 * @param rule units for each arm by the rules of thumb
 */
export function unitsForTailsSentence(
  units: number | null,
  rule: { readonly kohavi: number; readonly cochran: number },
  { many }: Called,
): string {
  const rules = `By rules of thumb each group needs ${count(rule.cochran)} (25 times the squared skewness, Cochran 1977) or ${count(rule.kohavi)} (355 times, Kohavi and others 2014).`;
  if (units === null) {
    return `How many ${many} it would take for both tails to be within a fifth of their nominal size cannot be told from these data: a few of them decide the skewness. ${rules}`;
  }
  return `Both tails are within a fifth of their nominal size from at least ${count(units)} ${many} in all on. ${rules}`;
}

/** Why no distribution was drawn, to follow "since". */
export function notDrawnReason({ notDrawn }: NotDrawn, { one, many }: Called): string {
  switch (notDrawn) {
    case "few-units":
      return `one of the groups has under 20 ${many}`;
    case "few-events":
      return `one of the groups has under 10 ${many} with the event, or under 10 without it`;
    case "no-spread":
      return `every ${one} has the same value`;
    case "undefined-draws":
      return "more than 1% of the draws have no spread or nothing to divide by";
    default:
      return unknown(notDrawn);
  }
}

/** What the drawn distribution left out; null where it left out nothing. */
export function undefinedDrawsSentence(undefinedDraws: number, draws: number): string | null {
  if (undefinedDraws === 0) return null;
  const were = undefinedDraws === 1 ? "was" : "were";
  return `${count(undefinedDraws)} of ${count(draws)} draws ${were} left out, for they have no spread or nothing to divide by.`;
}

/** A tail with a place more where the nominal one has two that count: 1.25% of several variants. */
function tailText(tail: number, nominal: number): string {
  return `${fixed(100 * tail, nominal >= 0.02 ? 1 : 2)}%`;
}

function unknown(reason: never): never {
  throw new Error(`no words for draws that are ${String(reason)}`);
}
