import type { Metric } from "../plan/index.ts";
import { type Engine, nano, whole } from "./engine.ts";
import { nanoText } from "./nano.ts";
import { atRank, type Statement, totals } from "./sql/index.ts";

/** Stage 9: caps, as exact decimal text. */

export async function capValue(metric: Metric, x: Statement, engine: Engine): Promise<string | null> {
  if (metric.cap === null) return null;
  return metric.cap.kind === "at" ? metric.cap.at : capAtQuantile(metric.cap.q, x, engine);
}

/** The ceil(n q)-th smallest of all values, variants pooled, zeros included (type 1 of Hyndman and Fan 1996). */
export async function capAtQuantile(q: string, x: Statement, engine: Engine): Promise<string | null> {
  const counts = await engine.query(totals([x]));
  const n = counts.reduce((sum, row) => sum + whole(row, "n0"), 0n);
  if (n === 0n) return null;
  const [row] = await engine.query(atRank(x, rankOf(q, n), n));
  return row === undefined ? null : nanoText(nano(row, "x"));
}

/** ceil(n q) in exact decimals of the plan's text, at least 1. */
export function rankOf(q: string, n: bigint): bigint {
  const [integer = "0", places = ""] = q.split(".");
  const by = 10n ** BigInt(places.length);
  const rank = (n * BigInt(integer + places) + by - 1n) / by;
  return rank < 1n ? 1n : rank;
}
