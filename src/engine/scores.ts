import type { Plan } from "../plan/index.ts";
import { type Engine, nano, real, whole } from "./engine.ts";
import { quotient } from "./nano.ts";
import { scaleOver } from "./pivot.ts";
import {
  type Dialect,
  doubleValue,
  EACH_BUCKET,
  extremes,
  type Over,
  type Statement,
  score,
  totals,
} from "./sql/index.ts";
import { doubleTables } from "./tables.ts";
import type { ScoreTable } from "./types.ts";

/** A ratio's score as the engine computes it, and its cells. */
export interface Score {
  readonly d: Statement;
  readonly table: ScoreTable;
}

/** Each ratio's score; a and b are its numerator, after the cap, and its denominator. */
export async function scoreTables(
  plan: Plan,
  ratios: readonly { readonly a: Statement; readonly b: Statement }[],
  engine: Engine,
  dialect: Dialect,
): Promise<Score[]> {
  if (ratios.length === 0) return [];
  const sums = await engine.query(totals(ratios.flatMap(({ a, b }) => [a, b])));
  const scores = ratios.map(({ a, b }, i) => {
    const arms = plan.variants.map((_, v) => {
      const row = sums.find((found) => Number(found.variant) === v);
      if (row === undefined || row[`total${2 * i}`] === null) return null;
      const totalOfB = nano(row, `total${2 * i + 1}`);
      if (totalOfB === 0n) return null;
      const n = whole(row, `n${2 * i + 1}`);
      const ratio = ratioOf(nano(row, `total${2 * i}`), totalOfB);
      return { ratio, meanOfB: ratioOf(totalOfB, n * 1_000_000_000n) };
    });
    return score(a, b, arms, dialect);
  });
  const tables = await unpivoted(scores, engine);
  return scores.flatMap((d, i) => {
    const table = tables[i];
    return table === undefined ? [] : [{ d, table }];
  });
}

/** Cells of doubles over the analysed units, or the rows that `over` names, each over the smallest power of two that reaches all of them. */
export async function unpivoted(
  values: readonly Statement[],
  engine: Engine,
  over: Over = EACH_BUCKET,
): Promise<ScoreTable[]> {
  if (values.length === 0) return [];
  const [ends = {}] = await engine.query(extremes(values, over.from));
  const scales = values.map((_, i) =>
    ends[`least${i}`] == null
      ? 1
      : scaleOver(Math.max(Math.abs(real(ends, `least${i}`)), Math.abs(real(ends, `most${i}`)))),
  );
  return doubleTables(
    values.map((x, i) => ({ value: doubleValue(x, scales[i] ?? 1), scale: scales[i] ?? 1, over })),
    engine,
  );
}

export const ratioOf = (a: bigint, b: bigint): number => (b < 0n ? quotient(-a, -b) : quotient(a, b));
