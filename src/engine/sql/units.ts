import type { Metric, Plan } from "../../plan/types.ts";
import { type Layout, type PartLayout, unitLineIds } from "../layout.ts";
import type { DayRun, Step } from "../zone.ts";
import { type Dialect, localDay } from "./dialect.ts";
import { followUpUs } from "./enrolments.ts";
import { PLACE } from "./matched.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/**
 * Stage 8: one row per unit that is analysed, or would be under another reasonable choice.
 * Reads   matched, enrolments
 * Writes  candidates: variant, bucket, analysed, other_way, any_follow_up, first_day (enrolled on the first local day on
 *         which an analysed unit was), followed (to the end of its follow-up), day (the local one of enrolment, 0 without time), k<s> (the level of subgroup column s),
 *         i<k> (enrolled in incident k); per condition of a metric's part r<i>, the rows in follow-up that meet it; per metric
 *         part x<p>, its value, NULL where the unit is left out; and z<m>, the metric's covariate, NULL where missing
 * A unit without a row that some metric matches keeps its row, with zeros.
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
  const windows = windowsOf(layout);
  // Metrics share what they have in common: forty of them may count rows of twenty events.
  const sums = distinct(layout.parts.map((part) => aggregate(part, windows.of(part), isShort, days, dialect)));
  const ofUnit = (part: PartLayout): OfUnit => ({
    rows: sql`s.${name(`r${windows.of(part)}`)}`,
    sum: sql`s.${name(`s${sums.at[layout.parts.indexOf(part)]}`)}`,
  });
  const enrolledOn = layout.hasTime ? localDay(sql`e.enrolled_us`, days) : sql`0`;
  const isFirstDay = firstDay === null ? sql`FALSE` : sql`${enrolledOn} = ${firstDay}`;
  const values = [
    ...layout.matches.map((_, i) => sql`coalesce(s.${name(`r${i}`)}, 0) AS ${name(`r${i}`)}`),
    ...layout.parts.flatMap((part, p) =>
      part.side === "before"
        ? []
        : [sql`CAST(${unitValue(plan, part, ofUnit(part))} AS ${dialect.sumType}) AS ${name(`x${p}`)}`],
    ),
    ...plan.metrics.flatMap((metric, m) =>
      metric.adjustFor === null
        ? []
        : [sql`CAST(${covariate(layout, metric, m, ofUnit)} AS ${dialect.sumType}) AS ${name(`z${m}`)}`],
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
      ...values,
    ])}
    FROM enrolments AS e
    LEFT JOIN (
      SELECT ${list([
        sql`id`,
        ...windows.all.map((_, w) => sql`count(*) FILTER (WHERE ${name(`w${w}`)}) AS ${name(`r${w}`)}`),
        ...sums.all.map((sum, i) => sql`${sum} AS ${name(`s${i}`)}`),
      ])}
      FROM (
        SELECT ${list([
          sql`id, at_us, enrolled_us`,
          ...layout.columns.flatMap((_, c) => (valued(layout, c) ? [name(`v${c}`)] : [])),
          ...windows.all.map((window, w) => sql`${inWindow(window)} AS ${name(`w${w}`)}`),
        ])}
        FROM matched WHERE kept
      )
      GROUP BY id
    ) AS s ON s.id = e.rowid
    WHERE e.line = ${analysed} OR e.other_way OR e.any_follow_up`;
}

/** The analysed among the candidates. */
export const units = (): Statement => sql`CREATE TEMP VIEW units AS SELECT * FROM candidates WHERE analysed`;

/** Rows that meet a condition in follow-up, or in the days before enrolment that a metric's covariate looks at. */
interface Window {
  readonly match: number;
  readonly before: number | null;
}

/** The different windows of all parts, and which of them a part has. */
function windowsOf(layout: Layout): { readonly all: readonly Window[]; readonly of: (part: PartLayout) => number } {
  const all: Window[] = layout.matches.map((_, match) => ({ match, before: null }));
  for (const { side, match, metric } of layout.parts) if (side === "before") all.push({ match, before: metric });
  const of = ({ side, match, metric }: PartLayout) =>
    all.findIndex((window) => window.match === match && window.before === (side === "before" ? metric : null));
  return { all, of };
}

const inWindow = ({ match, before }: Window): Statement =>
  before === null
    ? sql`place = ${PLACE.inside} AND ${name(`m${match}`)}`
    : sql`place = ${PLACE.before} AND ${name(`m${match}`)} AND ${name(`b${before}`)}`;

const valued = (layout: Layout, c: number): boolean => layout.parts.some(({ value }) => value === c);

/** Each statement once, and where every one of the given stands among them. */
function distinct(statements: readonly Statement[]): { readonly all: Statement[]; readonly at: readonly number[] } {
  const places = new Map<string, number>();
  const all: Statement[] = [];
  const at = statements.map((statement) => {
    const place = places.get(statement.text) ?? all.push(statement) - 1;
    places.set(statement.text, place);
    return place;
  });
  return { all, at };
}

/** A part's rows of a unit and what its aggregate makes of them; both NULL where the unit has no row of any metric. */
interface OfUnit {
  readonly rows: Statement;
  readonly sum: Statement;
}

/** A unit's covariate: without rows before it is 0, a column's value may be missing. */
function covariate(layout: Layout, metric: Metric, m: number, ofUnit: (part: PartLayout) => OfUnit): Statement {
  if (metric.adjustFor === null) return sql`NULL`;
  if (metric.adjustFor.kind === "column") return sql`e.${name(`z${layout.columns.indexOf(metric.adjustFor.column)}`)}`;
  const before = layout.parts.find((part) => part.metric === m && part.side === "before");
  if (before === undefined) throw new Error(`no days before enrolment of metric ${m}`);
  return metric.summary === "proportion"
    ? sql`CASE WHEN ${ofUnit(before).rows} > 0 THEN 1 ELSE 0 END`
    : sql`coalesce(${ofUnit(before).sum}, 0)`;
}

// A follow-up under so many days is counted as bits, not as a DISTINCT count: from late in the evening it touches one local
// day more, and one more again where clocks go forward or a day is skipped; a shift by more than 62 overflows.
const BITS = 61;

function aggregate(
  part: PartLayout,
  window: number,
  isShort: boolean,
  days: readonly Step<DayRun>[],
  dialect: Dialect,
): Statement {
  const { aggregate } = part.part;
  const value = name(`v${part.value ?? 0}`);
  const where = name(`w${window}`);
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
function unitValue(plan: Plan, part: PartLayout, { rows, sum }: OfUnit): Statement {
  const metric = plan.metrics[part.metric];
  if (metric === undefined) throw new Error(`no metric ${part.metric}`);
  const hasRows = sql`${rows} > 0`;
  if (metric.summary === "proportion") {
    const none = metric.withoutRows === "leave-out" ? sql`NULL` : sql`0`;
    return sql`CASE WHEN ${hasRows} THEN 1 ELSE ${none} END`;
  }
  if (metric.withoutRows === "zero") return sql`coalesce(${sum}, 0)`;
  const { kind } = part.part.aggregate;
  return kind === "count" || kind === "days" || kind === "sum"
    ? sql`CASE WHEN ${hasRows} THEN coalesce(${sum}, 0) END`
    : sum;
}

const list = (items: readonly Statement[]) => join(items, ", ");
