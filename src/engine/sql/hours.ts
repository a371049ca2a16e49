import type { Plan } from "../../plan/types.ts";
import { FATE, type Layout, unitLineIds } from "../layout.ts";
import { placeOf } from "./matched.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/** Rows by hour of the epoch: for the log's end, for hours without rows, and for where rows of analysed units fall. */

const HOUR_US = 3_600_000_000n;
const INT64_END = 1n << 63n;

/** First and last time of the rows that are not rejected. */
export interface TimeSpan {
  readonly firstUs: bigint;
  readonly lastUs: bigint;
}

/**
 * The hour in which an instant of a span lies. Counted from an hour before its first, one division does: times before 1970 count down,
 * and a division cuts toward zero. A span that 64 bits do not hold is counted from 1970.
 */
export function hourOf(atUs: Statement, { firstUs, lastUs }: TimeSpan): Statement {
  const first = (firstUs - (((firstUs % HOUR_US) + HOUR_US) % HOUR_US)) / HOUR_US;
  if (lastUs - first * HOUR_US >= INT64_END || first * HOUR_US < -INT64_END) {
    return sql`((${atUs} - ((${atUs} % ${HOUR_US} + ${HOUR_US}) % ${HOUR_US})) // ${HOUR_US})`;
  }
  return sql`((${atUs} - ${first * HOUR_US}) // ${HOUR_US} + ${first})`;
}

/**
 * Rows that are not rejected by entry of the log and hour. A gap of more than 7 days cannot lie inside an hour, so first and
 * last of each find every gap exactly (DESIGN 4, rule 7).
 * Reads   rows
 * Gives   source, hour, rows, first_us, last_us, counted (whether some metric's condition holds for a row of it)
 */
export function rowsByHour(layout: Layout, span: TimeSpan): Statement {
  const any =
    layout.matches.length === 0
      ? sql`FALSE`
      : join(
          layout.matches.map((_, i) => name(`m${i}`)),
          " OR ",
        );
  return sql`
    SELECT source, hour, count(*) AS rows, min(at_us) AS first_us, max(at_us) AS last_us, bool_or(counted) AS counted
    FROM (
      SELECT source, ${hourOf(sql`at_us`, span)} AS hour, at_us, ${any} AS counted
      FROM rows WHERE fate <> ${FATE.rejected}
    )
    GROUP BY source, hour
    ORDER BY source, first_us`;
}

/**
 * Rows of enrolled units, rejected ones apart, by entry of the log, hour, the unit's variant and their place.
 * Reads   rows, enrolments
 * Gives   source, hour, variant, place (of PLACE, for rows of analysed units that no line of the row ledger took; else NULL), rows
 */
export function rowsOfUnits(plan: Plan, layout: Layout, span: TimeSpan): Statement {
  const ids = unitLineIds(plan);
  const isAnalysed = sql`r.fate = ${FATE.seen} AND e.line = ${ids.length - 1}`;
  return sql`
    SELECT source, hour, variant, place, count(*) AS rows
    FROM (
      SELECT r.source, ${hourOf(sql`r.at_us`, span)} AS hour, e.variant,
        CASE WHEN ${isAnalysed} THEN ${placeOf(plan, layout)} END AS place
      FROM rows AS r
      JOIN enrolments AS e ON e.unit = r.unit
      WHERE r.fate <> ${FATE.rejected} AND e.line > ${ids.indexOf("unknown-variant")}
    )
    GROUP BY source, hour, variant, place`;
}

/** Hours of the epoch of one entry of the log, both inclusive. */
interface RunOfHours {
  readonly source: number;
  readonly first: number;
  readonly last: number;
}

/** Enrolled units with a row in some runs of hours, by the run's place. */
export const unitsInRuns = (runs: readonly RunOfHours[], span: TimeSpan, unknownVariantLine: number): Statement => sql`
  SELECT h.run, count(DISTINCT e.rowid) AS units
  FROM rows AS r
  JOIN (VALUES ${join(
    runs.map(({ source, first, last }, run) => sql`(${run}, ${source}, ${first}, ${last})`),
    ", ",
  )}) AS h(run, source, first, last) ON h.source = r.source AND ${hourOf(sql`r.at_us`, span)} BETWEEN h.first AND h.last
  JOIN enrolments AS e ON e.unit = r.unit
  WHERE r.fate <> ${FATE.rejected} AND e.line > ${unknownVariantLine}
  GROUP BY h.run`;
