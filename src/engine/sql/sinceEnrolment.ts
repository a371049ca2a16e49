import type { Plan } from "../../plan/types.ts";
import { type Layout, type PartLayout, unitLineIds } from "../layout.ts";
import type { Dialect } from "./dialect.ts";
import { followUpUs } from "./enrolments.ts";
import { double, join, name, type Statement, sql } from "./sql.ts";

const DAY_US = 86_400_000_000n;

/** A part of a metric that can be told day by day: index into the layout's parts, and the cap on a unit's whole value. */
export interface DailyPart {
  readonly part: number;
  readonly cap: string | null;
}

/**
 * Stage 12: what each analysed unit that was followed to the end did on each day since its enrolment, days of 24 hours.
 * Reads   matched, enrolments
 * Writes  by_day: id (the enrolments' rowid), variant, day (0, 1, ...), d<p>, the part's value of that day alone
 * A day on which a unit has no row that counts has no row here either, or no value, which stands for zeros. Under a cap d<p> is what the
 * day adds to the unit's capped value, so that the days add up to that.
 */
export function byDay(
  plan: Plan,
  layout: Layout,
  parts: readonly DailyPart[],
  days: number,
  logEndUs: bigint,
  dialect: Dialect,
): Statement {
  const analysed = unitLineIds(plan).length - 1;
  const laidOut = parts.map(({ part, cap }) => ({ part, cap, of: layoutOf(layout, part) }));
  const counts = [...new Set(laidOut.map(({ of }) => of.match))].map((match) => name(`m${match}`));
  const values = laidOut.map(
    ({ part, of }) => sql`CAST(${ofCounted(plan, of)} AS ${dialect.sumType}) AS ${name(`d${part}`)}`,
  );
  const capped = laidOut.map(({ part, cap }) =>
    cap === null ? name(`d${part}`) : sql`${addedUnder(name(`d${part}`), cap, dialect)} AS ${name(`d${part}`)}`,
  );
  return sql`
    CREATE TEMP TABLE by_day AS
    SELECT ${list([sql`id, variant, day`, ...capped])}
    FROM (
      SELECT e.rowid AS id, e.variant, s.day, ${list(laidOut.map(({ part }) => name(`d${part}`)))}
      FROM (
        SELECT ${list([sql`key // ${days} AS id`, sql`CAST(key % ${days} AS SMALLINT) AS day`, ...values])}
        FROM (
          SELECT id * ${days} + (at_us - enrolled_us) // ${DAY_US} AS key, *
          FROM matched
          WHERE (${join(counts, " OR ")}) AND line = ${analysed}
            AND enrolled_us + ${followUpUs(plan)} <= ${logEndUs}
            AND at_us >= enrolled_us AND at_us < enrolled_us + ${BigInt(days) * DAY_US}
        )
        GROUP BY key
      ) AS s
      JOIN enrolments AS e ON e.rowid = s.id
    )`;
}

/** Units followed to the end by variant, and of each value how many have one. Gives variant, and per value i: n<i>. */
export const followedUnits = (values: readonly Statement[]): Statement => sql`
  SELECT ${list([sql`variant`, ...values.map((x, i) => sql`count(${x}) AS ${name(`n${i}`)}`)])}
  FROM units WHERE followed GROUP BY variant`;

/** One row a unit with some row in by_day: s<i>, the sum over days of (2 day - (days - 1)) times a value. */
export function slopes(values: readonly Statement[], days: number): Statement {
  const sums = values.map((value, i) => sql`sum((2 * day - ${days - 1}) * ${value}) AS ${name(`s${i}`)}`);
  return sql`(SELECT ${list([sql`variant`, ...sums])} FROM by_day GROUP BY id, variant)`;
}

/** A ratio's terms on a day: (2 day - (days - 1)) (a - R b) / mean(b), R and mean(b) of the unit's own arm on that day. */
export interface DayScore {
  readonly a: Statement;
  readonly b: Statement;
  /** Per variant, per day; null where b adds up to 0. */
  readonly arms: readonly (readonly ({ readonly ratio: number; readonly meanOfB: number } | null)[])[];
}

/** The term of a row of by_day; NULL in an arm that lacks a ratio on some day. */
export function dayTerm({ a, b, arms }: DayScore, days: number, dialect: Dialect): Statement {
  const cases = arms.flatMap((own, variant) => {
    const known = own.filter((day) => day !== null);
    if (known.length < days) return [];
    const ofDay = (pick: (day: (typeof known)[number]) => number) =>
      join(
        known.map((day, d) => sql`WHEN ${d} THEN ${double(pick(day))}`),
        "\n",
      );
    const ratio = sql`CASE day ${ofDay((day) => day.ratio)} END`;
    const meanOfB = sql`CASE day ${ofDay((day) => day.meanOfB)} END`;
    return [
      sql`WHEN ${variant} THEN (2 * day - ${days - 1}) * (((${dialect.toDouble(a)}) - ${ratio} * (${dialect.toDouble(b)})) / ${meanOfB})`,
    ];
  });
  return cases.length === 0 ? sql`CAST(NULL AS DOUBLE)` : sql`CASE variant ${join(cases, "\n")} END`;
}

/**
 * One row a unit: s<i>, the sum of a term over days, rounded to 2^-62 of a power of two: whole numbers add up to the same
 * in any order, doubles would not.
 * @param reach powers of two that no sum of a unit goes beyond
 */
export function scoreSlopes(terms: readonly Statement[], reach: readonly number[]): Statement {
  const sums = terms.map((_, i) => {
    const unit = double((reach[i] ?? 1) * 2 ** -62);
    return sql`CAST(sum(CAST(floor(${name(`t${i}`)} / ${unit} + 0.5) AS BIGINT)) AS DOUBLE) * ${unit} AS ${name(`s${i}`)}`;
  });
  const columns = terms.map((term, i) => sql`${term} AS ${name(`t${i}`)}`);
  return sql`(SELECT ${list([sql`variant`, ...sums])} FROM (SELECT ${list([sql`id`, sql`variant`, ...columns])} FROM by_day) GROUP BY id, variant)`;
}

function layoutOf(layout: Layout, part: number): PartLayout {
  const found = layout.parts[part];
  if (found === undefined) throw new Error(`no part ${part} of ${layout.parts.length}`);
  return found;
}

/** Where units without rows are left out, a day has no value either unless some row of the metric counts on it. */
function ofCounted(plan: Plan, of: PartLayout): Statement {
  const value = dayValue(plan, of);
  return plan.metrics[of.metric]?.withoutRows === "leave-out"
    ? sql`CASE WHEN bool_or(${name(`m${of.match}`)}) THEN ${value} END`
    : value;
}

/** Of a share, and of days, whether there was a row; else the number of rows or their sum. */
function dayValue(plan: Plan, { metric, match, part, value }: PartLayout): Statement {
  const counted = name(`m${match}`);
  const isYesOrNo = plan.metrics[metric]?.summary === "proportion" || part.aggregate.kind === "days";
  if (isYesOrNo) return sql`CASE WHEN bool_or(${counted}) THEN 1 ELSE 0 END`;
  if (value === null) return sql`count(*) FILTER (WHERE ${counted})`;
  return sql`coalesce(sum(${name(`v${value}`)}) FILTER (WHERE ${counted}), 0)`;
}

/** What a day adds to min(cap, sum so far). */
function addedUnder(value: Statement, cap: string, dialect: Dialect): Statement {
  const most = sql`CAST(${cap} AS ${dialect.sumType})`;
  const soFar = sql`CAST(sum(${value}) OVER (PARTITION BY id ORDER BY day) AS ${dialect.sumType})`;
  // The lesser of a cap and nothing would be the cap.
  const added = sql`least(${most}, ${soFar}) - least(${most}, ${soFar} - ${value})`;
  return sql`CAST(CASE WHEN ${value} IS NOT NULL THEN ${added} END AS ${dialect.sumType})`;
}

const list = (items: readonly Statement[]) => join(items, ", ");
