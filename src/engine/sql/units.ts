import type { Metric, Plan } from "../../plan/types.ts";
import { FATE, type Layout, type PartLayout, unitLineIds } from "../layout.ts";
import type { DayRun, Step } from "../zone.ts";
import { type Dialect, localDay } from "./dialect.ts";
import { daysUs, followUpUs } from "./enrolments.ts";
import { placeOf } from "./metricRows.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/**
 * Stage 7: one row per unit that is analysed, or would be under another reasonable choice.
 * Reads   rows, enrolments
 * Writes  candidates: variant, bucket, analysed, other_way, any_follow_up, first_day (enrolled on the first local day on
 *         which an analysed unit was), followed (to the end of its follow-up), day (the local one of enrolment, 0 without time), k<s> (the level of subgroup column s),
 *         i<k> (enrolled in incident k), before_rows, after_rows, inside_rows; per metric part x<p>, its value, NULL where
 *         the unit is left out; per metric counted<m>, its counted rows, numberless<m>, those of them without a number,
 *         and z<m>, its covariate, NULL where missing
 * Every unit has at least its enrolling row, so the inner join loses none. Units are grouped by the enrolments'
 * rowid: a number, where the id is text.
 */
export function candidates(
  plan: Plan,
  layout: Layout,
  days: readonly Step<DayRun>[],
  firstDay: number | null,
  levels: readonly Statement[],
  logEndUs: bigint | null,
  dialect: Dialect,
): Statement {
  const analysed = unitLineIds(plan).length - 1;
  const isShort = plan.followUp !== null && plan.followUp.days < BITS;
  const aggregates = layout.parts.flatMap((part, p) => [
    sql`${aggregate(part, isShort, days, dialect)} AS ${name(`s${p}`)}`,
    sql`count(*) FILTER (WHERE ${counted(part)}) AS ${name(`r${p}`)}`,
  ]);
  const metricRows = plan.metrics.flatMap((_, m) => {
    const parts = layout.parts.filter((part) => part.metric === m && part.side !== "before");
    const numberless = parts.flatMap((part) =>
      part.value === null ? [] : [sql`(${counted(part)} AND ${name(`v${part.value}`)} IS NULL)`],
    );
    return [
      sql`count(*) FILTER (WHERE ${join(
        parts.map((part) => sql`(${counted(part)})`),
        " OR ",
      )}) AS ${name(`counted${m}`)}`,
      numberless.length === 0
        ? sql`0 AS ${name(`numberless${m}`)}`
        : sql`count(*) FILTER (WHERE ${join(numberless, " OR ")}) AS ${name(`numberless${m}`)}`,
    ];
  });
  const enrolledOn = layout.hasTime ? localDay(sql`e.enrolled_us`, days) : sql`0`;
  const isFirstDay = firstDay === null ? sql`FALSE` : sql`${enrolledOn} = ${firstDay}`;
  const values = [
    ...layout.parts.flatMap((part, p) =>
      part.side === "before" ? [] : [sql`CAST(${unitValue(plan, part, p)} AS ${dialect.sumType}) AS ${name(`x${p}`)}`],
    ),
    ...plan.metrics.flatMap((_, m) => [name(`counted${m}`), name(`numberless${m}`)]),
    ...plan.metrics.map(
      (metric, m) => sql`CAST(${covariate(layout, metric, m)} AS ${dialect.sumType}) AS ${name(`z${m}`)}`,
    ),
  ];
  return sql`
    CREATE TEMP TABLE candidates AS
    SELECT ${list([
      sql`e.variant`,
      sql`${dialect.bucket(sql`e.unit`)} AS bucket`,
      sql`e.line = ${analysed} AS analysed`,
      sql`e.other_way, e.any_follow_up, ${isFirstDay} AS first_day`,
      plan.followUp === null || logEndUs === null
        ? sql`FALSE AS followed`
        : sql`e.enrolled_us + ${followUpUs(plan)} <= ${logEndUs} AS followed`,
      sql`CAST(${enrolledOn} AS INTEGER) AS day`,
      ...levels.map((level, s) => sql`${level} AS ${name(`k${s}`)}`),
      ...layout.incidents.map((_, k) => sql`e.${name(`i${k}`)}`),
      sql`before_rows, after_rows, inside_rows`,
      ...values,
    ])}
    FROM (
      SELECT ${list([
        sql`id`,
        sql`count(*) FILTER (WHERE place < 0) AS before_rows`,
        sql`count(*) FILTER (WHERE place > 0) AS after_rows`,
        sql`count(*) FILTER (WHERE place = 0) AS inside_rows`,
        ...aggregates,
        ...metricRows,
      ])}
      FROM (
        SELECT ${list([sql`e.rowid AS id, e.enrolled_us, ${placeOf(plan, layout)} AS place`, ...daysBefore(plan), sql`r.*`])}
        FROM rows AS r
        JOIN enrolments AS e ON e.unit = r.unit
        WHERE r.fate = ${FATE.seen} AND (e.line = ${analysed} OR e.other_way OR e.any_follow_up)
      )
      GROUP BY id
    ) AS s
    JOIN enrolments AS e ON e.rowid = s.id`;
}

/** The analysed among the candidates. */
export const units = (): Statement => sql`CREATE TEMP VIEW units AS SELECT * FROM candidates WHERE analysed`;

function counted(part: PartLayout): Statement {
  const window = part.side === "before" ? sql`place = -1 AND ${name(`b${part.metric}`)}` : sql`place = 0`;
  return sql`${window} AND ${name(`m${part.match}`)}`;
}

/** Whether a row before enrolment lies in the days that a metric's covariate looks at. */
function daysBefore(plan: Plan): Statement[] {
  return plan.metrics.flatMap((metric, m) =>
    metric.adjustFor?.kind === "days-before"
      ? [sql`r.at_us >= e.enrolled_us - ${daysUs(metric.adjustFor.days)} AS ${name(`b${m}`)}`]
      : [],
  );
}

/** A unit's covariate: without rows before it is 0, a column's value may be missing. */
function covariate(layout: Layout, metric: Metric, m: number): Statement {
  if (metric.adjustFor === null) return sql`NULL`;
  if (metric.adjustFor.kind === "column") return name(`z${layout.columns.indexOf(metric.adjustFor.column)}`);
  const p = layout.parts.findIndex((part) => part.metric === m && part.side === "before");
  return metric.summary === "proportion"
    ? sql`CASE WHEN ${name(`r${p}`)} > 0 THEN 1 ELSE 0 END`
    : sql`coalesce(${name(`s${p}`)}, 0)`;
}

// A follow-up under so many days is counted as bits, not as a DISTINCT count: from late in the evening it touches one local
// day more, and one more again where clocks go forward or a day is skipped; a shift by more than 62 overflows.
const BITS = 61;

function aggregate(part: PartLayout, isShort: boolean, days: readonly Step<DayRun>[], dialect: Dialect): Statement {
  const { aggregate } = part.part;
  const value = name(`v${part.value ?? 0}`);
  const where = counted(part);
  switch (aggregate.kind) {
    case "count":
      return sql`count(*) FILTER (WHERE ${where})`;
    case "days":
      return isShort && part.side !== "before"
        ? sql`bit_count(bit_or(CASE WHEN ${where} THEN CAST(1 AS BIGINT) << CAST(${localDay(sql`at_us`, days)} - ${localDay(sql`enrolled_us`, days)} AS INTEGER) END))`
        : sql`count(DISTINCT ${localDay(sql`at_us`, days)}) FILTER (WHERE ${where})`;
    case "sum":
      return sql`sum(${value}) FILTER (WHERE ${where})`;
    case "max":
      return sql`max(${value}) FILTER (WHERE ${where})`;
    case "min":
      return sql`min(${value}) FILTER (WHERE ${where})`;
    case "first":
      return dialect.firstValue(value, sql`at_us`, where);
    case "last":
      return dialect.lastValue(value, sql`at_us`, where);
  }
}

/** A unit's value of a part: 0 or left out without rows; of max, min, first, last also when no row holds a number. */
function unitValue(plan: Plan, part: PartLayout, p: number): Statement {
  const metric = plan.metrics[part.metric];
  if (metric === undefined) throw new Error(`no metric ${part.metric}`);
  const hasRows = sql`${name(`r${p}`)} > 0`;
  if (metric.summary === "proportion") {
    const none = metric.withoutRows === "leave-out" ? sql`NULL` : sql`0`;
    return sql`CASE WHEN ${hasRows} THEN 1 ELSE ${none} END`;
  }
  const sum = name(`s${p}`);
  if (metric.withoutRows === "zero") return sql`coalesce(${sum}, 0)`;
  const { kind } = part.part.aggregate;
  return kind === "count" || kind === "days" || kind === "sum"
    ? sql`CASE WHEN ${hasRows} THEN coalesce(${sum}, 0) END`
    : sum;
}

const list = (items: readonly Statement[]) => join(items, ", ");
