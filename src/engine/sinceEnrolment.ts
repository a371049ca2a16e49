import type { Metric, Plan } from "../plan/index.ts";
import { count, type Engine, nano, type Row } from "./engine.ts";
import { greater, lesser } from "./groups.ts";
import type { Layout } from "./layout.ts";
import type { MetricValue } from "./metrics.ts";
import { powerOfTwoOver } from "./pivot.ts";
import {
  byDay,
  type Dialect,
  extremes,
  followedUnits,
  name,
  type Over,
  type Statement,
  slopes,
  sql,
} from "./sql/index.ts";
import { type DecimalMeasure, decimalTables, jointTables, measured } from "./tables.ts";
import type { CellTable, GroupCells, JointTable, SinceEnrolment } from "./types.ts";

const EACH_DAY: Over = { bucket: sql`day`, units: sql`TRUE`, from: sql`by_day` };

/** A metric that can be told day by day, with the parts that it is told from. */
interface Daily {
  readonly metric: number;
  readonly of: number;
  readonly per: number | null;
}

/**
 * The metrics that decide by day since enrolment, over the units followed to the end; null where that cannot be told: without
 * a follow-up of two whole days, of quantiles, and of what does not add up over days. Not of secondary metrics: unit by
 * unit and day by day is the finest and dearest of all groupings.
 */
export async function sinceEnrolment(
  plan: Plan,
  layout: Layout,
  values: readonly MetricValue[],
  logEndUs: bigint | null,
  engine: Engine,
  dialect: Dialect,
): Promise<(SinceEnrolment | null)[]> {
  const days = Math.floor(plan.followUp?.days ?? 0);
  const daily = days < 2 || logEndUs === null ? [] : plan.metrics.flatMap((metric, m) => dailyOf(metric, m, layout));
  if (daily.length === 0 || logEndUs === null) return plan.metrics.map(() => null);

  const parts = daily.flatMap(({ metric, of, per }) => [
    { part: of, cap: values[metric]?.cap ?? null },
    ...(per === null ? [] : [{ part: per, cap: null }]),
  ]);
  await engine.run(byDay(plan, layout, parts, days, logEndUs, dialect));
  const followed = await engine.query(followedUnits(daily.map(({ metric }) => values[metric]?.value ?? sql`NULL`)));
  const columns = parts.map(({ part }) => name(`d${part}`));
  const measures = await aboutZero(columns, sql`by_day`, engine, dialect);
  const tables = await decimalTables(measures, engine, EACH_DAY);
  const at = (part: number) => parts.findIndex((one) => one.part === part);
  const pairs = daily.flatMap(({ of, per }) =>
    per === null
      ? []
      : [{ y: one(measures, at(of)), x: one(measures, at(per)), ofY: one(tables, at(of)), ofX: one(tables, at(per)) }],
  );
  const joints = await jointTables(pairs, engine, EACH_DAY);
  const plain = daily.filter(({ per }) => per === null).map(({ of }) => at(of));
  const slopeTables = await slopesOf(
    plain.map((i) => one(measures, i)),
    days,
    engine,
    dialect,
  );

  let [nextPair, nextPlain] = [0, 0];
  const found = daily.map(({ metric, of, per }, i) => {
    const units = plan.variants.map((_, v) => unitsOf(followed, `n${i}`, v));
    const joint = per === null ? null : one(joints, nextPair++);
    const groups: GroupCells = {
      of: withZeros(one(tables, at(of)), units, days),
      joint: joint === null ? null : pairsWithZeros(joint, units, days),
    };
    const slope = per === null ? withZeros(one(slopeTables, nextPlain++), units, 1) : null;
    return { metric, since: { days, groups, slope } };
  });
  return plan.metrics.map((_, m) => found.find(({ metric }) => metric === m)?.since ?? null);
}

/** Of each value the cells of its slope over the days, unit by unit. */
async function slopesOf(
  measures: readonly DecimalMeasure[],
  days: number,
  engine: Engine,
  dialect: Dialect,
): Promise<CellTable[]> {
  if (measures.length === 0) return [];
  const from = slopes(
    measures.map(({ x }) => x),
    days,
  );
  // The weights add up to less than days^2, so this scale reaches every sum of theirs.
  const reach = powerOfTwoOver(BigInt(days * days) * 1_000_000_000n);
  const ofSlopes = measures.map(({ scale }, i) => measured(name(`s${i}`), "0", scale * reach, [], dialect));
  return decimalTables(ofSlopes, engine, { bucket: sql`0`, units: sql`TRUE`, from });
}

/** What adds up over days: rows and sums, and whether there was a row. */
function dailyOf(metric: Metric, m: number, layout: Layout): Daily[] {
  const { summary } = metric;
  if (metric.role === "secondary") return [];
  const adds = (side: "of" | "per") => {
    const kind = metric[side]?.aggregate.kind;
    return summary === "proportion" || kind === "count" || kind === "sum" || kind === "days";
  };
  if (summary === "quantile" || !adds("of") || (metric.per !== null && !adds("per"))) return [];
  const at = (side: "of" | "per") => layout.parts.findIndex((part) => part.metric === m && part.side === side);
  return [{ metric: m, of: at("of"), per: metric.per === null ? null : at("per") }];
}

/** Measured against 0, so that units without a row add nothing to any sum but their number. */
async function aboutZero(
  values: readonly Statement[],
  from: Statement,
  engine: Engine,
  dialect: Dialect,
): Promise<DecimalMeasure[]> {
  const [ends = {}] = await engine.query(extremes(values, from));
  const end = (column: string) => (ends[column] == null ? 0n : nano(ends, column));
  return values.map((x, i) => {
    const sizes = [end(`least${i}`), end(`most${i}`)].map((value) => powerOfTwoOver(value < 0n ? -value : value));
    return measured(x, "0", Math.max(...sizes), [], dialect);
  });
}

/** The cells with every unit in every group: those that had no row there count as zeros. */
function withZeros(table: CellTable, units: readonly number[], groups: number): CellTable {
  const { places, n, row } = filled(table, units, groups);
  const whole = (column: readonly bigint[]) => places.map((place) => row(column, place) ?? 0n);
  const end = (column: readonly bigint[], pick: (a: bigint, b: bigint) => bigint) =>
    places.map((place, i) => {
      const own = row(column, place);
      return own === null ? 0n : (n[i] ?? 0) > (row(table.n, place) ?? 0) ? pick(own, 0n) : own;
    });
  return {
    pivot: table.pivot,
    scale: table.scale,
    variant: places.map(({ variant }) => variant),
    bucket: places.map(({ group }) => group),
    n,
    high1: whole(table.high1),
    high2: whole(table.high2),
    high3: whole(table.high3),
    high4: whole(table.high4),
    low1: whole(table.low1),
    low2: whole(table.low2),
    low3: whole(table.low3),
    low4: whole(table.low4),
    total: whole(table.total),
    smallest: end(table.smallest, lesser),
    largest: end(table.largest, greater),
  };
}

function pairsWithZeros(table: JointTable, units: readonly number[], groups: number): JointTable {
  const { places, n, row } = filled(table, units, groups);
  const whole = (column: readonly bigint[]) => places.map((place) => row(column, place) ?? 0n);
  return {
    pivots: table.pivots,
    scales: table.scales,
    variant: places.map(({ variant }) => variant),
    bucket: places.map(({ group }) => group),
    n,
    high10: whole(table.high10),
    high01: whole(table.high01),
    high20: whole(table.high20),
    high11: whole(table.high11),
    high02: whole(table.high02),
    low10: whole(table.low10),
    low01: whole(table.low01),
    low20: whole(table.low20),
    low11: whole(table.low11),
    low02: whole(table.low02),
    totalY: whole(table.totalY),
    totalX: whole(table.totalX),
  };
}

interface Place {
  readonly variant: number;
  readonly group: number;
}

/** Every variant that has units in every group, how many they are, and what a column holds there. */
function filled(table: CellTable | JointTable, units: readonly number[], groups: number) {
  const found = new Map(table.n.map((_, i) => [`${table.variant[i]}/${table.bucket[i]}`, i]));
  const places = units.flatMap((n, variant) =>
    n === 0 ? [] : Array.from({ length: groups }, (_, group): Place => ({ variant, group })),
  );
  const row = <T>(column: readonly T[], { variant, group }: Place): T | null => {
    const place = found.get(`${variant}/${group}`);
    return place === undefined ? null : (column[place] ?? null);
  };
  return { places, row, n: places.map(({ variant }) => units[variant] ?? 0) };
}

function unitsOf(rows: readonly Row[], column: string, variant: number): number {
  const row = rows.find((found) => count(found, "variant") === variant);
  return row === undefined ? 0 : count(row, column);
}

function one<T>(all: readonly T[], place: number): T {
  const found = all[place];
  if (found === undefined) throw new Error(`nothing at ${place} among ${all.length}`);
  return found;
}
