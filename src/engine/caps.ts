import type { Metric } from "../plan/index.ts";
import { count, type Engine, nano, whole } from "./engine.ts";
import { nanoText } from "./nano.ts";
import { atEachRank, type Statement, totals } from "./sql/index.ts";

/** Stage 9: the cap of each metric, as exact decimal text, null without one; xs are their values, over a row of `units`. */
export async function capValues(
  metrics: readonly Metric[],
  xs: readonly Statement[],
  engine: Engine,
): Promise<(string | null)[]> {
  const asked = metrics.flatMap(({ cap }, m) => {
    const x = xs[m];
    return cap?.kind === "quantile" && x !== undefined ? [{ m, x, q: cap.q }] : [];
  });
  const found = await atQuantiles(asked, engine);
  return metrics.map(({ cap }, m) =>
    cap?.kind === "at" ? cap.at : (found[asked.findIndex((one) => one.m === m)] ?? null),
  );
}

/** The ceil(n q)-th smallest of all values, variants pooled, zeros included (type 1 of Hyndman and Fan 1996). */
async function atQuantiles(
  asked: readonly { readonly x: Statement; readonly q: string }[],
  engine: Engine,
): Promise<(string | null)[]> {
  if (asked.length === 0) return [];
  const counts = await engine.query(totals(asked.map(({ x }) => x)));
  const ranked = asked.flatMap(({ x, q }, i) => {
    const n = counts.reduce((sum, row) => sum + whole(row, `n${i}`), 0n);
    return n === 0n ? [] : [{ i, x, n, rank: rankOf(q, n) }];
  });
  if (ranked.length === 0) return asked.map(() => null);
  const values = new Map(
    (await engine.query(atEachRank(ranked))).map((row) => [ranked[count(row, "place")]?.i, nanoText(nano(row, "x"))]),
  );
  return asked.map((_, i) => values.get(i) ?? null);
}

/** ceil(n q) in exact decimals of the plan's text, at least 1. */
export function rankOf(q: string, n: bigint): bigint {
  const [integer = "0", places = ""] = q.split(".");
  const by = 10n ** BigInt(places.length);
  const rank = (n * BigInt(integer + places) + by - 1n) / by;
  return rank < 1n ? 1n : rank;
}
