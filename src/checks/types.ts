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
}
