import { FATE, type Layout } from "../layout.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/**
 * Times of one entry of the log in bins of a day, for the log's end (DESIGN 4, rule 7): a gap of more than 7 days cannot
 * lie inside a bin, so first and last of each bin find every gap exactly.
 * Reads   rows
 * Gives   source, bin, rows, first_us, last_us, counted (whether some metric's condition holds for a row of it)
 */
export function timeBins(layout: Layout): Statement {
  const any =
    layout.matches.length === 0
      ? sql`FALSE`
      : join(
          layout.matches.map((_, i) => name(`m${i}`)),
          " OR ",
        );
  return sql`
    SELECT source, at_us // 86400000000 AS bin, count(*) AS rows, min(at_us) AS first_us, max(at_us) AS last_us,
      bool_or(${any}) AS counted
    FROM rows
    WHERE fate <> ${FATE.rejected}
    GROUP BY source, at_us // 86400000000
    ORDER BY source, first_us`;
}
