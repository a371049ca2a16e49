import type { Contrast } from "../stats/types.ts";
import type { Effect } from "./types.ts";

/** The contrast that the rule is held against: the adjusted one where there is one (METHODS 1). */
export function deciding({ contrast, adjusted }: Effect): Contrast {
  return adjusted === null ? contrast : adjusted.contrast;
}
