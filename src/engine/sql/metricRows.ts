import type { Layout, PartLayout } from "../layout.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/**
 * The rows that some metric's part matches, by where they ended, for the ledger of each metric.
 * Reads   matched
 * Gives   fate, line (of the unit, NULL for a row that ended before), place (of PLACE), and per part rows<i> and sum<i>, the
 *         exact sum of its column, NULL where no row holds a number; per metric, given by its parts, counted<m>, the rows
 *         that one of them matches, and numberless<m>, those of them without a number
 */
export function metricRows(parts: readonly PartLayout[], metrics: readonly (readonly PartLayout[])[]): Statement {
  const sums = parts.flatMap((part, i) => [
    sql`count(*) FILTER (WHERE ${matches(part)}) AS ${name(`rows${i}`)}`,
    ...(part.value === null
      ? []
      : [sql`sum(${name(`v${part.value}`)}) FILTER (WHERE ${matches(part)}) AS ${name(`sum${i}`)}`]),
  ]);
  const counts = metrics.flatMap((own, m) => {
    const numberless = own.flatMap((part) =>
      part.value === null ? [] : [sql`(${matches(part)} AND ${name(`v${part.value}`)} IS NULL)`],
    );
    return [
      sql`count(*) FILTER (WHERE ${join(own.map(matches), " OR ")}) AS ${name(`counted${m}`)}`,
      numberless.length === 0
        ? sql`0 AS ${name(`numberless${m}`)}`
        : sql`count(*) FILTER (WHERE ${join(numberless, " OR ")}) AS ${name(`numberless${m}`)}`,
    ];
  });
  return sql`
    SELECT ${join([sql`fate, line, place`, ...sums, ...counts], ", ")}
    FROM matched
    GROUP BY fate, line, place`;
}

const matches = ({ match }: PartLayout): Statement => name(`m${match}`);

/** Of every condition of the metrics' parts the rows that the analysed units have in follow-up. Gives rows<i>. */
export const countedRows = (layout: Layout): Statement => sql`
  SELECT ${join(
    layout.matches.map((_, i) => sql`coalesce(sum(${name(`r${i}`)}), 0) AS ${name(`rows${i}`)}`),
    ", ",
  )} FROM units`;
