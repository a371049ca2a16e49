import type { Metric, Plan } from "../plan/index.ts";
import { count, type Engine, nano, type Row, real } from "./engine.ts";
import type { Layout } from "./layout.ts";
import type { MetricValue } from "./metrics.ts";
import { powerOfTwoOver, scaleOver } from "./pivot.ts";
import { ratioOf, unpivoted } from "./scores.ts";
import {
  byDay,
  type Dialect,
  dayTerm,
  extremes,
  followedUnits,
  name,
  type Over,
  type Statement,
  scoreSlopes,
  slopes,
  sql,
} from "./sql/index.ts";
import { type DecimalMeasure, decimalTables, jointTables, measured } from "./tables.ts";
import type { CellTable, GroupCells, JointTable, ScoreTable, SinceEnrolment } from "./types.ts";
import { pairsWithZeros, scoresWithZeros, withZeros } from "./zeros.ts";

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
  const tables = await decimalTables(
    measures.map((measure) => ({ measure, over: EACH_DAY })),
    engine,
  );
  const at = (part: number) => parts.findIndex((one) => one.part === part);
  const pairs = daily.flatMap(({ of, per }) =>
    per === null
      ? []
      : [
          {
            y: one(measures, at(of)),
            x: one(measures, at(per)),
            over: EACH_DAY,
            ofY: one(tables, at(of)),
            ofX: one(tables, at(per)),
          },
        ],
  );
  const joints = await jointTables(pairs, engine, dialect);
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
    return { metric, since: { days, groups, slope, units, of, per } };
  });
  const scores = await scoresOf(
    found.flatMap(({ since }) => (since.groups.joint === null ? [] : [{ ...since, joint: since.groups.joint }])),
    plan.variants.length,
    days,
    engine,
    dialect,
  );
  return plan.metrics.map((_, m) => {
    const since = found.find(({ metric }) => metric === m)?.since;
    if (since === undefined) return null;
    return { days, groups: since.groups, slope: since.slope, scores: scores.get(since.of) ?? null };
  });
}

interface RatioByDay {
  readonly of: number;
  readonly per: number | null;
  readonly joint: JointTable;
  readonly units: readonly number[];
}

/** The slopes of the ratios' scores, once the ratio of each arm on each day is known; by the numerator's part. */
async function scoresOf(
  ratios: readonly RatioByDay[],
  variants: number,
  days: number,
  engine: Engine,
  dialect: Dialect,
): Promise<Map<number, ScoreTable>> {
  if (ratios.length === 0) return new Map();
  const terms = ratios.map(({ of, per, joint }) => {
    const arms = Array.from({ length: variants }, (_, v) =>
      Array.from({ length: days }, (__, day) => ratioOn(joint, v, day)),
    );
    return dayTerm({ a: name(`d${of}`), b: name(`d${per ?? of}`), arms }, days, dialect);
  });
  const [ends = {}] = await engine.query(extremes(terms, sql`by_day`));
  const reach = terms.map((_, i) => scaleOver(days * largestSize(ends, i)));
  const tables = await unpivoted(
    terms.map((_, i) => name(`s${i}`)),
    engine,
    { bucket: sql`0`, units: sql`TRUE`, from: scoreSlopes(terms, reach) },
  );
  return new Map(ratios.map(({ of, units }, i) => [of, scoresWithZeros(one(tables, i), units)]));
}

function ratioOn(joint: JointTable, variant: number, day: number): { ratio: number; meanOfB: number } | null {
  const row = joint.n.findIndex((_, i) => joint.variant[i] === variant && joint.bucket[i] === day);
  const [a, b, n] = [joint.totalY[row], joint.totalX[row], joint.n[row]];
  if (a === undefined || b === undefined || n === undefined || b === 0n) return null;
  return { ratio: ratioOf(a, b), meanOfB: ratioOf(b, BigInt(n) * 1_000_000_000n) };
}

function largestSize(ends: Row, i: number): number {
  if (ends[`least${i}`] == null) return 0;
  return Math.max(Math.abs(real(ends, `least${i}`)), Math.abs(real(ends, `most${i}`)));
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
  const over: Over = { bucket: sql`0`, units: sql`TRUE`, from };
  return decimalTables(
    ofSlopes.map((measure) => ({ measure, over })),
    engine,
  );
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

function unitsOf(rows: readonly Row[], column: string, variant: number): number {
  const row = rows.find((found) => count(found, "variant") === variant);
  return row === undefined ? 0 : count(row, column);
}

function one<T>(all: readonly T[], place: number): T {
  const found = all[place];
  if (found === undefined) throw new Error(`nothing at ${place} among ${all.length}`);
  return found;
}
