import type { Plan } from "../plan/index.ts";
import { capValues } from "./caps.ts";
import { choiceCells } from "./choices.ts";
import { endsOfArms } from "./ends.ts";
import { count, type Engine, type Row } from "./engine.ts";
import type { Layout } from "./layout.ts";
import { armsOfJoint, armsOfTable, type MeasuredMetric } from "./measuredMetric.ts";
import type { CountedRows } from "./metricLedger.ts";
import { scoreTables } from "./scores.ts";
import { sizeTables } from "./sizes.ts";
import { capped, type Dialect, EACH_BUCKET, leftOut, name, type Statement, sql } from "./sql/index.ts";
import { type DecimalMeasure, decimalMeasures, groupedJointTables, groupedTables } from "./tables.ts";
import type { CellTable, GroupCells, JointTable, MetricCells, MetricGroups } from "./types.ts";

/** A metric's values over a row of `candidates`. */
export interface MetricValue {
  /** Before the cap. */
  readonly plain: Statement;
  readonly cap: string | null;
  readonly value: Statement;
  readonly per: Statement | null;
  readonly covariate: Statement | null;
}

/** Stage 9: caps. */
export async function metricValues(
  plan: Plan,
  layout: Layout,
  engine: Engine,
  dialect: Dialect,
): Promise<MetricValue[]> {
  const of = (m: number, side: "of" | "per") =>
    name(`x${layout.parts.findIndex((part) => part.metric === m && part.side === side)}`);
  const plains = plan.metrics.map((_, m) => of(m, "of"));
  const caps = await capValues(plan.metrics, plains, engine);
  return plan.metrics.map((metric, m) => {
    const plain = of(m, "of");
    const cap = caps[m] ?? null;
    return {
      plain,
      cap,
      value: capped(plain, cap, dialect),
      per: metric.per === null ? null : of(m, "per"),
      covariate: metric.adjustFor === null ? null : name(`z${m}`),
    };
  });
}

/**
 * Stages 10 and 11: pivots, scales and cells; then the ratios' scores and theirs, and the same under other choices.
 * @param counted the rows that each metric counts
 * @param groupings by which else than buckets the units are summed, over a row of `candidates`
 */
export async function metricCells(
  plan: Plan,
  values: readonly MetricValue[],
  groupings: Groupings,
  counted: readonly CountedRows[],
  engine: Engine,
  dialect: Dialect,
): Promise<{ readonly metrics: MetricCells[]; readonly groups: Omit<MetricGroups, "sinceEnrolment">[] }> {
  // A covariate counts over the units that have a value too.
  const paired = values.map(({ per, covariate, value }) =>
    covariate === null ? per : sql`CASE WHEN ${value} IS NOT NULL THEN ${covariate} END`,
  );
  const partners = paired.flatMap((x, m) => (x === null ? [] : [{ m, x }]));
  const all = [...values.map(({ value }) => value), ...partners.map(({ x }) => x)];
  const measures = await decimalMeasures(all, sql`units`, engine, dialect);
  const over = { ...EACH_BUCKET, others: [...(groupings.day === null ? [] : [groupings.day]), ...groupings.levels] };
  const grouped = await groupedTables(
    measures.map((measure) => ({ measure, over })),
    engine,
  );
  const tables = grouped.map((all) => tableOf(all, 0));
  const pairs = partners.map(({ m }, i) => ({
    y: measureOf(measures, m),
    x: measureOf(measures, values.length + i),
    over,
    ofY: grouped[m] ?? [],
    ofX: grouped[values.length + i] ?? [],
  }));
  const groupedJoints = await groupedJointTables(pairs, engine, dialect);
  const joints = groupedJoints.map(([byBucket]) => byBucket);
  const ratios = values.flatMap(({ value, per }, m) => (per === null ? [] : [{ m, a: value, b: per }]));
  const scores = await scoreTables(plan, ratios, engine, dialect);
  const measured = plan.metrics.map((metric, m): MeasuredMetric => {
    const partner = partners.findIndex((one) => one.m === m);
    const [pair, joint] = [pairs[partner], joints[partner]];
    const of = tableOf(tables, m);
    return {
      metric,
      plain: values[m]?.plain ?? sql`NULL`,
      cap: values[m]?.cap ?? null,
      y: measureOf(measures, m),
      of,
      arms: armsOfTable(of),
      paired:
        pair === undefined || joint === undefined
          ? null
          : { x: pair.x, of: tableOf(pair.ofX, 0), joint, arms: armsOfJoint(joint) },
    };
  });
  const choices = await choiceCells(plan, measured, engine, dialect);
  const ends = await endsOfArms(
    plan,
    measured.map((one, m) => ({ ...one, score: scores[ratios.findIndex((ratio) => ratio.m === m)] ?? null })),
    engine,
    dialect,
  );
  const plain = values.map((value) => value.plain);
  const out = await engine.query(
    leftOut(
      plain,
      values.map(({ cap }) => cap),
      dialect,
    ),
  );
  const shaped = plan.metrics.flatMap(({ summary }, m) => (summary === "proportion" ? [] : [m]));
  const sizes = await sizeTables(
    shaped.map((m) => values[m]?.value ?? sql`NULL`),
    engine,
    dialect,
  );

  const groups = plan.metrics.map((metric, m) => {
    const partner = partners.findIndex((one) => one.m === m);
    const own = metric.summary === "quantile" ? [] : groupsOf(grouped[m] ?? [], groupedJoints[partner] ?? null);
    const [byDay = null] = groupings.day === null ? [] : own;
    return { metric: metric.name, byDay, byLevel: own.slice(groupings.day === null ? 0 : 1) };
  });
  const metrics = plan.metrics.map((metric, m) => {
    const partner = partners.findIndex((one) => one.m === m);
    const x = tables[values.length + partner];
    const joint = joints[partner];
    const score = scores[ratios.findIndex((ratio) => ratio.m === m)]?.table;
    const hasPartner = partner >= 0 && x !== undefined && joint !== undefined;
    const cap = values[m]?.cap ?? null;
    return {
      metric: metric.name,
      leftOut: byVariant(plan, out, `none${m}`),
      notZero: byVariant(plan, out, `some${m}`),
      countedRows: counted[m]?.rows ?? 0,
      countedWithoutNumber: counted[m]?.withoutNumber ?? 0,
      cap: cap === null ? null : { value: cap, units: byVariant(plan, out, `over${m}`) },
      of: tableOf(tables, m),
      ratio: hasPartner && score !== undefined ? { per: x, score, joint } : null,
      covariate: hasPartner && metric.adjustFor !== null ? { x, joint } : null,
      sizes: sizes[shaped.indexOf(m)] ?? null,
      choices: choices[m] ?? [],
      ends: ends[m] ?? [],
    };
  });
  return { metrics, groups };
}

/** What divides the analysed units, over a row of `candidates`: the day of enrolment, where there is time, and levels. */
export interface Groupings {
  readonly day: Statement | null;
  readonly levels: readonly Statement[];
}

/** All groupings but that by bucket. */
function groupsOf(tables: readonly CellTable[], joints: readonly JointTable[] | null): GroupCells[] {
  return tables.slice(1).map((of, g) => ({ of, joint: joints?.[g + 1] ?? null }));
}

function tableOf(tables: readonly CellTable[], m: number): CellTable {
  const table = tables[m];
  if (table === undefined) throw new Error(`no cells for metric ${m} of ${tables.length}`);
  return table;
}

function measureOf(measures: readonly DecimalMeasure[], at: number): DecimalMeasure {
  const measure = measures[at];
  if (measure === undefined) throw new Error(`no measure ${at} of ${measures.length}`);
  return measure;
}

function byVariant(plan: Plan, rows: readonly Row[], column: string): number[] {
  return plan.variants.map((_, v) => {
    const row = rows.find((found) => Number(found.variant) === v);
    return row === undefined ? 0 : count(row, column);
  });
}
