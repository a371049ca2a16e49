import type { Check, CheckOutcome, CheckPart } from "./types.ts";

/** One part of a check while it is being judged: what the reader gets, and what the whole check takes from its worst part. */
export interface Finding extends CheckPart {
  readonly strong: boolean;
  readonly remedy: string;
}

/** A check is as bad as its worst part, and speaks with that part's words. Without a part there is no check. */
export function asCheck(id: string, findings: readonly Finding[], figures: Check["figures"]): Check | null {
  const [worst] = [...findings].sort((a, b) => rank(b) - rank(a));
  if (worst === undefined) return null;
  const { result, strong, sentence, remedy } = worst;
  return {
    id,
    result,
    strong,
    sentence,
    remedy,
    figures,
    parts: findings.map((part) => ({
      about: part.about,
      result: part.result,
      sentence: part.sentence,
      figures: part.figures,
      remedy: part.remedy,
    })),
  };
}

/** A part that found nothing to say: no remedy. */
export function passed(about: string, sentence: string, figures: CheckPart["figures"]): Finding {
  return { about, result: "pass", strong: false, sentence, remedy: "", figures };
}

const BADNESS: Readonly<Record<CheckOutcome, number>> = { pass: 0, caution: 1, fail: 3 };

function rank({ result, strong }: Finding): number {
  return BADNESS[result] + (strong ? 1 : 0);
}
