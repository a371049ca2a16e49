import { FATE } from "../layout.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/** Counts for the ledger and the soundness checks. All read tables of a few stages; none writes. */

export const rowsByFate = (): Statement => sql`SELECT fate, count(*) AS rows FROM rows GROUP BY fate`;
export const rowsByFile = (): Statement => sql`SELECT file, count(*) AS rows FROM rows GROUP BY file`;
export const rowsByReason = (): Statement => sql`
  SELECT reason, count(*) AS rows FROM rows WHERE fate = ${FATE.rejected} GROUP BY reason`;

/** Of the rows that no line of the ledger took, and of all that are not rejected. */
export const timeRange = (): Statement => sql`
  SELECT min(at_us) FILTER (WHERE fate = ${FATE.seen}) AS first_us, max(at_us) FILTER (WHERE fate = ${FATE.seen}) AS last_us,
    min(at_us) AS first_of_all_us, max(at_us) AS last_of_all_us
  FROM rows WHERE fate <> ${FATE.rejected}`;

export const unitsByLine = (): Statement => sql`
  SELECT line, variant, count(*) AS units, sum(rows) AS rows FROM enrolments GROUP BY line, variant`;

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

/** Files with rejected rows: how many in all, and of the two reasons for which the reader could not cut them into cells. */
export const rejectsByFile = (unreadable: number, notText: number): Statement => sql`
  SELECT file, count(*) AS rows, count(*) FILTER (WHERE reason = ${unreadable}) AS unreadable,
    count(*) FILTER (WHERE reason = ${notText}) AS not_text
  FROM rows WHERE fate = ${FATE.rejected} GROUP BY file ORDER BY file`;

/** Rejected rows of a file as the first reading has them. */
export const rejectedTexts = (file: number): Statement => sql`
  SELECT reason, text FROM rows WHERE fate = ${FATE.rejected} AND file = ${file} ORDER BY reason, text`;
