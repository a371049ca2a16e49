import { parsePercent } from "../number.ts";
import type { Problem } from "../types.ts";
import { type Loose, mapping } from "./loose.ts";

/** The least that a confidence or a power can be meant to be. What lies below is most often the share that may go wrong. */
const LEAST = 0.5;

const MEANINGS: readonly (readonly [key: string, message: (percent: number) => string])[] = [
  [
    "confidence",
    (percent) =>
      `A confidence says how often an interval holds the truth, so it is at least 50%. Where ${percent}% may go wrong write ${100 - percent}%.`,
  ],
  [
    "power",
    (percent) =>
      `Power says how often a test finds the effect, so it is at least 50%. Where ${percent}% may miss it write ${100 - percent}%.`,
  ],
];

/** A confidence of 5% would pass for a rule, and adopt nearly anything. */
export function decisionRules(plan: Loose): readonly Problem[] {
  const decision = mapping(plan.decision) ?? {};
  return MEANINGS.flatMap(([key, message]): readonly Problem[] => {
    const share = shareOf(decision[key]);
    if (share === null || share <= 0 || share >= LEAST) return [];
    return [{ path: ["decision", key], at: "value", message: message(Number((share * 100).toPrecision(6))) }];
  });
}

/** Null for what is no share; the schema tells that. */
function shareOf(written: unknown): number | null {
  if (typeof written === "number") return written;
  const percent = typeof written === "string" ? parsePercent(written) : null;
  return percent === null ? null : Number(percent);
}
