import type { Plan } from "../plan/index.ts";
import { capValue } from "./caps.ts";
import { choiceCells } from "./choices.ts";
import { count, type Engine, type Row } from "./engine.ts";
import type { Layout } from "./layout.ts";
import { scoreTables } from "./scores.ts";
import { capped, countedRows, type Dialect, leftOut, name, pairsAtEnds, type Statement, sql } from "./sql/index.ts";
import { decimalMeasures, decimalTables, jointTables } from "./tables.ts";
import type { CellTable, MetricCells, UnitEnds } from "./types.ts";

/** A metric's values over a row of `candidates`. */
export interface MetricValue {
  /** Before the cap. */
  readonly plain: Statement;
  readonly cap: string | null;
  readonly value: Statement;
  readonly per: Statement | null;
  readonly covariate: Statement | null;
}

/** Stage 8: caps. */
export async function metricValues(
  plan: Plan,
  layout: Layout,
  engine: Engine,
  dialect: Dialect,
): Promise<MetricValue[]> {
  return Promise.all(
    plan.metrics.map(async (metric, m) => {
      const at = (side: "of" | "per") => layout.parts.findIndex((part) => part.metric === m && part.side === side);
      const plain = name(`x${at("of")}`);
      const cap = await capValue(metric, plain, engine);
      return {
        plain,
        cap,
        value: capped(plain, cap, dialect),
        per: metric.per === null ? null : name(`x${at("per")}`),
        covariate: metric.adjustFor === null ? null : name(`z${m}`),
      };
    }),
  );
}

/** Stages 9 and 10: pivots, scales and cells; then the ratios' scores and theirs, and the same under other choices. */
export async function metricCells(
  plan: Plan,
  values: readonly MetricValue[],
  engine: Engine,
  dialect: Dialect,
): Promise<MetricCells[]> {
  // A covariate counts over the units that have a value too.
  const paired = values.map(({ per, covariate, value }) =>
    covariate === null ? per : sql`CASE WHEN ${value} IS NOT NULL THEN ${covariate} END`,
  );
  const partners = paired.flatMap((x, m) => (x === null ? [] : [{ m, x }]));
  const all = [...values.map(({ value }) => value), ...partners.map(({ x }) => x)];
  const measures = await decimalMeasures(all, sql`units`, engine, dialect);
  const tables = await decimalTables(measures, engine);
  const pairs = partners.flatMap(({ m }, i) => {
    const [y, x] = [measures[m], measures[values.length + i]];
    return y === undefined || x === undefined ? [] : [[y, x] as const];
  });
  const joints = await jointTables(pairs, engine);
  const ratios = values.flatMap(({ value, per }, m) => (per === null ? [] : [{ m, a: value, b: per }]));
  const scores = await scoreTables(plan, ratios, engine, dialect);
  const choices = await choiceCells(
    plan,
    plan.metrics.flatMap((metric, m) => {
      const own = values[m];
      return own === undefined ? [] : [{ metric, plain: own.plain, value: own.value, paired: paired[m] ?? null }];
    }),
    engine,
    dialect,
  );
  const ends = await engine.query(pairsAtEnds(values.map(({ value }, m) => [value, paired[m] ?? null] as const)));
  const plain = values.map((value) => value.plain);
  const out = await engine.query(
    leftOut(
      plain,
      values.map(({ cap }) => cap),
      dialect,
    ),
  );
  const [rows = {}] = await engine.query(countedRows(plan.metrics.length));

  return plan.metrics.map((metric, m) => {
    const partner = partners.findIndex((one) => one.m === m);
    const x = tables[values.length + partner];
    const joint = joints[partner];
    const score = scores[ratios.findIndex((ratio) => ratio.m === m)];
    const hasPartner = partner >= 0 && x !== undefined && joint !== undefined;
    const cap = values[m]?.cap ?? null;
    return {
      metric: metric.name,
      leftOut: byVariant(plan, out, `none${m}`),
      countedRows: count(rows, `counted${m}`),
      countedWithoutNumber: count(rows, `numberless${m}`),
      cap: cap === null ? null : { value: cap, units: byVariant(plan, out, `over${m}`) },
      of: tableOf(tables, m),
      ratio: hasPartner && score !== undefined ? { per: x, score, joint } : null,
      covariate: hasPartner && metric.adjustFor !== null ? { x, joint } : null,
      choices: choices[m] ?? [],
      ends: plan.variants.map((_, v) => endsOf(ends, v, m)),
    };
  });
}

function tableOf(tables: readonly CellTable[], m: number): CellTable {
  const table = tables[m];
  if (table === undefined) throw new Error(`no cells for metric ${m} of ${tables.length}`);
  return table;
}

function byVariant(plan: Plan, rows: readonly Row[], column: string): number[] {
  return plan.variants.map((_, v) => {
    const row = rows.find((found) => Number(found.variant) === v);
    return row === undefined ? 0 : count(row, column);
  });
}

function endsOf(rows: readonly Row[], variant: number, m: number): UnitEnds | null {
  const row = rows.find((found) => Number(found.variant) === variant);
  const at = (column: string) => {
    const value = row?.[column];
    return typeof value === "object" && value !== null ? value.nano : null;
  };
  const [least, most] = [at(`ly${m}`), at(`my${m}`)];
  if (least === null || most === null) return null;
  return {
    smallest: { value: least, x: at(`lx${m}`) },
    largest: { value: most, x: at(`mx${m}`) },
  };
}
