import type { Metric, Plan } from "../plan/index.ts";
import { count, type Engine, nano, type Row, real, whole, wholeOrNull } from "./engine.ts";
import type { Layout } from "./layout.ts";
import { nanoText, quotient } from "./nano.ts";
import { pivotAndScale, scaleOver } from "./pivot.ts";
import {
  atRank,
  capped,
  cells,
  classes,
  countedRows,
  type Dialect,
  decimalValue,
  doubleValue,
  extremes,
  leftOut,
  type Measured,
  name,
  type Statement,
  score,
  totals,
} from "./sql/index.ts";
import type { CellTable, MetricCells, ScoreTable } from "./types.ts";

/** Stages 8 to 10: caps, pivots and scales, cells; then the ratios' scores and theirs. Reads `units` only. */
export async function metricCells(
  plan: Plan,
  layout: Layout,
  engine: Engine,
  dialect: Dialect,
): Promise<MetricCells[]> {
  const raw = layout.parts.map((part, p) => (part.side === "before" ? name(`z${part.metric}`) : name(`x${p}`)));
  const caps = await Promise.all(
    layout.parts.map((part, p) => {
      const metric = plan.metrics[part.metric];
      return metric === undefined || part.side !== "of" ? null : capValue(metric, name(`x${p}`), engine);
    }),
  );
  const values = raw.map((x, p) => capped(x, caps[p] ?? null, dialect));
  const measures = await decimalMeasures(values, engine, dialect);
  const parts = await tables(
    measures.map((measure) => measure.value),
    engine,
  );
  const out = await engine.query(leftOut(raw, caps, dialect));
  const [rows = {}] = await engine.query(countedRows(plan.metrics.length));
  const scores = await scoreTables(plan, layout, values, engine, dialect);

  return plan.metrics.map((metric, m) => {
    const of = layout.parts.findIndex((part) => part.metric === m && part.side === "of");
    const per = layout.parts.findIndex((part) => part.metric === m && part.side === "per");
    const byVariant = (column: string) =>
      plan.variants.map((_, v) => {
        const row = out.find((found) => Number(found["variant"]) === v);
        return row === undefined ? 0 : count(row, column);
      });
    const cap = caps[of] ?? null;
    return {
      metric: metric.name,
      leftOut: byVariant(`none${of}`),
      countedRows: count(rows, `counted${m}`),
      countedWithoutNumber: count(rows, `numberless${m}`),
      cap: cap === null ? null : { value: cap, units: byVariant(`over${of}`) },
      of: decimalTable(parts, of, measures[of]),
      ratio: per < 0 ? null : { per: decimalTable(parts, per, measures[per]), score: scores[m] ?? emptyScore },
    };
  });
}

/** The cap as exact decimal text. A quantile is the ceil(n q)-th smallest of all values, variants pooled, zeros included. */
async function capValue(metric: Metric, x: Statement, engine: Engine): Promise<string | null> {
  if (metric.cap === null) return null;
  if (metric.cap.kind === "at") return metric.cap.at;
  const counts = await engine.query(totals([x]));
  const n = counts.reduce((sum, row) => sum + whole(row, "n0"), 0n);
  if (n === 0n) return null;
  const [row] = await engine.query(atRank(x, rankOf(metric.cap.q, n), n));
  return row === undefined ? null : nanoText(nano(row, "x"));
}

/** ceil(n q) in exact decimals of the plan's text, at least 1. */
export function rankOf(q: string, n: bigint): bigint {
  const [integer = "0", places = ""] = q.split(".");
  const by = 10n ** BigInt(places.length);
  const rank = (n * BigInt(integer + places) + by - 1n) / by;
  return rank < 1n ? 1n : rank;
}

interface DecimalMeasure {
  readonly pivot: string;
  readonly scale: number;
  readonly value: Measured;
}

async function decimalMeasures(
  values: readonly Statement[],
  engine: Engine,
  dialect: Dialect,
): Promise<DecimalMeasure[]> {
  const rows = await engine.query(classes(values, dialect));
  return values.map((x, part) => {
    const { pivot, scale } = pivotAndScale(
      rows
        .filter((row) => Number(row["part"]) === part)
        .map((row) => ({
          powerOfTwo: wholeOrNull(row, "class") === null ? null : count(row, "class"),
          n: whole(row, "n"),
          total: nano(row, "total"),
          least: nano(row, "least"),
          most: nano(row, "most"),
        })),
    );
    return { pivot: nanoText(pivot), scale, value: decimalValue(x, nanoText(pivot), scale, dialect) };
  });
}

/** Cells of many values, some at a time: a statement of a thousand columns plans slower than it runs. */
async function tables(values: readonly Measured[], engine: Engine): Promise<{ rows: Row[]; at: number }[]> {
  const found: { rows: Row[]; at: number }[] = [];
  for (let from = 0; from < values.length; from += VALUES_AT_ONCE) {
    const some = values.slice(from, from + VALUES_AT_ONCE);
    const rows = await engine.query(cells(some));
    found.push(...some.map((_, at) => ({ rows, at })));
  }
  return found;
}
const VALUES_AT_ONCE = 12;

async function scoreTables(
  plan: Plan,
  layout: Layout,
  values: readonly Statement[],
  engine: Engine,
  dialect: Dialect,
): Promise<(ScoreTable | null)[]> {
  const ratios = plan.metrics.flatMap((_, m) => {
    const a = values[layout.parts.findIndex((part) => part.metric === m && part.side === "of")];
    const b = values[layout.parts.findIndex((part) => part.metric === m && part.side === "per")];
    return a === undefined || b === undefined ? [] : [{ m, a, b }];
  });
  if (ratios.length === 0) return plan.metrics.map(() => null);
  const sums = await engine.query(totals(ratios.flatMap(({ a, b }) => [a, b])));
  const scores = ratios.map(({ a, b }, i) => {
    const arms = plan.variants.map((_, v) => {
      const row = sums.find((found) => Number(found["variant"]) === v);
      if (row === undefined || row[`total${2 * i}`] === null) return null;
      const totalOfB = nano(row, `total${2 * i + 1}`);
      if (totalOfB === 0n) return null;
      const totalOfA = nano(row, `total${2 * i}`);
      const n = whole(row, `n${2 * i + 1}`);
      return { ratio: ratioOf(totalOfA, totalOfB), meanOfB: ratioOf(totalOfB, n * 1_000_000_000n) };
    });
    return score(a, b, arms, dialect);
  });
  const [ends = {}] = await engine.query(extremes(scores));
  const scales = scores.map((_, i) =>
    ends[`least${i}`] == null
      ? 1
      : scaleOver(Math.max(Math.abs(real(ends, `least${i}`)), Math.abs(real(ends, `most${i}`)))),
  );
  const found = await tables(
    scores.map((x, i) => doubleValue(x, scales[i] ?? 1)),
    engine,
  );
  return plan.metrics.map((_, m) => {
    const i = ratios.findIndex((ratio) => ratio.m === m);
    return i < 0 ? null : scoreTable(found, i, scales[i] ?? 1);
  });
}

const ratioOf = (a: bigint, b: bigint): number => (b < 0n ? quotient(-a, -b) : quotient(a, b));

function decimalTable(
  found: readonly { rows: Row[]; at: number }[],
  p: number,
  measure: DecimalMeasure | undefined,
): CellTable {
  const { rows, at } = part(found, p);
  return {
    pivot: measure?.pivot ?? "0",
    scale: measure?.scale ?? 1,
    ...sumColumns(rows, at),
    total: rows.map((row) => nano(row, `total${at}`)),
    smallest: rows.map((row) => nano(row, `least${at}`)),
    largest: rows.map((row) => nano(row, `most${at}`)),
  };
}

function scoreTable(found: readonly { rows: Row[]; at: number }[], i: number, scale: number): ScoreTable {
  const { rows, at } = part(found, i);
  return {
    scale,
    ...sumColumns(rows, at),
    smallest: rows.map((row) => real(row, `least${at}`)),
    largest: rows.map((row) => real(row, `most${at}`)),
  };
}

/** The rows of one value; a bucket in which no unit has one says nothing. */
function part(found: readonly { rows: Row[]; at: number }[], i: number): { rows: Row[]; at: number } {
  const { rows, at } = found[i] ?? { rows: [], at: 0 };
  return { rows: rows.filter((row) => count(row, `n${at}`) > 0), at };
}

function sumColumns(rows: readonly Row[], at: number) {
  const sums = (kind: "h" | "l", k: number) => rows.map((row) => whole(row, `${kind}${at}_${k}`));
  return {
    variant: rows.map((row) => Number(row["variant"])),
    bucket: rows.map((row) => Number(row["bucket"])),
    n: rows.map((row) => count(row, `n${at}`)),
    high1: sums("h", 1),
    high2: sums("h", 2),
    high3: sums("h", 3),
    high4: sums("h", 4),
    low1: sums("l", 1),
    low2: sums("l", 2),
    low3: sums("l", 3),
    low4: sums("l", 4),
  };
}

const emptyScore: ScoreTable = { scale: 1, ...sumColumns([], 0), smallest: [], largest: [] };
