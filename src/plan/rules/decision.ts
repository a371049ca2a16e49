import { parsePercent } from "../number.ts";
import type { Problem } from "../types.ts";
import { type Loose, mapping } from "./loose.ts";

/** The least that a confidence or a power can be meant to be. What lies below is most often the share that may go wrong. */
const LEAST = 0.5;

const MEANINGS = {
  confidence: ["says how often an interval holds the truth", "may go wrong"],
  power: ["says how often a test finds the effect", "may miss it"],
} as const;

/** What is wrong with a share under one half as a confidence or a power; null where nothing is. @param name how it is called */
export function tooLow(key: keyof typeof MEANINGS, share: number, name: string): string | null {
  if (share <= 0 || share >= LEAST) return null;
  const percent = Number((share * 100).toPrecision(6));
  const [meaning, harm] = MEANINGS[key];
  return `${name} ${meaning}, so it is at least 50%. Where ${percent}% ${harm} write ${100 - percent}%.`;
}

/** A confidence of 5% would pass for a rule, and adopt nearly anything. */
export function decisionRules(plan: Loose): readonly Problem[] {
  const decision = mapping(plan.decision) ?? {};
  return (["confidence", "power"] as const).flatMap((key): readonly Problem[] => {
    const share = shareOf(decision[key]);
    const message = share === null ? null : tooLow(key, share, key === "power" ? "Power" : "A confidence");
    return message === null ? [] : [{ path: ["decision", key], at: "value", message }];
  });
}

/** Null for what is no share; the schema tells that. */
function shareOf(written: unknown): number | null {
  if (typeof written === "number") return written;
  const percent = typeof written === "string" ? parsePercent(written) : null;
  return percent === null ? null : Number(percent);
}
