import { FATE } from "../layout.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/** Counts for the ledger and the soundness checks. All read tables of a few stages; none writes. */

export const rowsByFate = (): Statement => sql`SELECT fate, count(*) AS rows FROM rows GROUP BY fate`;
export const rowsByFile = (): Statement => sql`SELECT file, count(*) AS rows FROM rows GROUP BY file`;
export const rowsByReason = (): Statement => sql`
  SELECT reason, count(*) AS rows FROM rows WHERE fate = ${FATE.rejected} GROUP BY reason`;

export const timeRange = (): Statement => sql`
  SELECT min(at_us) AS first_us, max(at_us) AS last_us FROM rows WHERE fate = ${FATE.seen}`;

export const unitsByLine = (): Statement => sql`
  SELECT line, variant, count(*) AS units, sum(rows) AS rows FROM enrolments GROUP BY line, variant`;

/** Rows of the analysed units, by where they fall. */
export const analysedRows = (): Statement => sql`
  SELECT coalesce(sum(before_rows), 0) AS before_rows, coalesce(sum(after_rows), 0) AS after_rows,
    coalesce(sum(inside_rows), 0) AS inside_rows
  FROM units`;

/** Analysed units by local day of enrolment and variant. */
export const analysedByDay = (): Statement => sql`
  SELECT day, variant, count(*) AS units FROM units GROUP BY day, variant ORDER BY day`;

/** Enrolled units (past the line unknown-variant) by first variant, and of them the switched. */
export const enrolledByVariant = (unknownVariantLine: number): Statement => sql`
  SELECT variant, count(*) AS units, count(*) FILTER (WHERE switched) AS switched
  FROM enrolments WHERE line > ${unknownVariantLine} GROUP BY variant`;

/** Enrolled units by variant that have a row of a fate. */
export const unitsWithFate = (fate: number, unknownVariantLine: number): Statement => sql`
  SELECT e.variant, count(*) AS units
  FROM (SELECT DISTINCT unit FROM rows WHERE fate = ${fate} AND unit IS NOT NULL) AS r
  JOIN enrolments AS e ON e.unit = r.unit
  WHERE e.line > ${unknownVariantLine}
  GROUP BY e.variant`;

/** First and last enrolment of units on a line or a later one. */
export const enrolmentRange = (fromLine: number): Statement => sql`
  SELECT min(enrolled_us) AS first_us, max(enrolled_us) AS last_us FROM enrolments WHERE line >= ${fromLine}`;

/** Of the analysed, those that enrolled in each incident. Gives variant, units<k>. */
export function unitsInIncidents(incidents: number): Statement {
  const counts = Array.from(
    { length: incidents },
    (_, k) => sql`count(*) FILTER (WHERE ${name(`i${k}`)}) AS ${name(`units${k}`)}`,
  );
  return sql`SELECT variant, ${join(counts, ", ")} FROM units GROUP BY variant`;
}

/** Values that rows hold, rejected ones included, commonest first. */
export const eventCounts = (limit: number): Statement => sql`
  SELECT event AS value, count(*) AS rows FROM rows
  WHERE event IS NOT NULL
  GROUP BY event ORDER BY rows DESC, value LIMIT ${limit}`;

export const variantCounts = (): Statement => sql`
  SELECT variant, count(*) AS rows FROM rows
  WHERE variant IS NOT NULL
  GROUP BY variant`;

export const otherVariantCounts = (limit: number): Statement => sql`
  SELECT other_variant AS value, count(*) AS rows FROM rows
  WHERE other_variant IS NOT NULL
  GROUP BY other_variant ORDER BY rows DESC, value LIMIT ${limit}`;

/** Which of some events a row has. */
export const eventsThatOccur = (events: Statement): Statement => sql`
  SELECT DISTINCT event AS value FROM rows WHERE event IN (${events})`;

/** Counted rows of each metric, and those of them without a number. */
export function countedRows(metrics: number): Statement {
  const sums = Array.from({ length: metrics }, (_, m) => [`counted${m}`, `numberless${m}`]).flat();
  return sql`SELECT ${join(
    sums.map((column) => sql`coalesce(sum(${name(column)}), 0) AS ${name(column)}`),
    ", ",
  )} FROM units`;
}

/** Files with rejected rows: how many in all, and of the two reasons for which the reader could not cut them into cells. */
export const rejectsByFile = (unreadable: number, notText: number): Statement => sql`
  SELECT file, count(*) AS rows, count(*) FILTER (WHERE reason = ${unreadable}) AS unreadable,
    count(*) FILTER (WHERE reason = ${notText}) AS not_text
  FROM rows WHERE fate = ${FATE.rejected} GROUP BY file ORDER BY file`;

/** Rejected rows of a file as the first reading has them. */
export const rejectedTexts = (file: number): Statement => sql`
  SELECT reason, text FROM rows WHERE fate = ${FATE.rejected} AND file = ${file} ORDER BY reason, text`;
