import type { Progress } from "../index.ts";
import { count } from "../words/index.ts";

/** "reading rows  1,204,000 rows  34%": what is known, nothing else. */
export function progressText({ stage, rows, share }: Progress): string {
  const parts = [stage];
  if (rows > 0) parts.push(`${count(rows)} rows`);
  // Whole percents, cut: 100% only when it is done.
  if (share !== null) parts.push(`${Math.floor(share * 100)}%`);
  return parts.join("  ");
}
