import type { Method, Normality } from "../stats/index.ts";

export type CheckOutcome = "pass" | "caution" | "fail";

/** A figure of a check: anything JSON holds, never NaN or undefined. */
export type Figure = number | string | boolean | null | readonly Figure[] | { readonly [name: string]: Figure };

/** One soundness check: the worst of its parts. In report.json the figures stand beside the other keys. */
export interface Check {
  readonly id: string;
  readonly result: CheckOutcome;
  /** A strong caution. Always false for pass and fail. */
  readonly strong: boolean;
  readonly sentence: string;
  /** What to do; "" when the check passed. */
  readonly remedy: string;
  readonly figures: { readonly [name: string]: Figure };
  readonly parts: readonly CheckPart[];
}
export interface CheckPart {
  readonly about: string;
  readonly result: CheckOutcome;
  readonly sentence: string;
  readonly figures: { readonly [name: string]: Figure };
  /** What to do about this part; of a check's worst part it is the check's own. Not in report.json. */
  readonly remedy?: string;
}

/** What the checks look at of the contrast that decides of one metric and variant: whoever compared the arms hands it over. */
export interface ContrastFigures {
  readonly metric: string;
  readonly variant: string;
  readonly control: string;
  /** The method that counts. */
  readonly method: Method;
  readonly normality: Normality | null;
}
