import { FATE, type Layout } from "../layout.ts";
import type { Dialect } from "./dialect.ts";
import { stored, storedColumns } from "./rows.ts";
import { join, type Statement, sql } from "./sql.ts";

/**
 * Stage 3: of rows of one entry of the log that share an event id, the first in canonical order is kept.
 * Ids are compared by a 64-bit hash first, and as text only among the few rows whose hash occurs twice.
 */

/**
 * Canonical order after the unit's variant and time are known (DESIGN 4, rule 3): event, then the plan's columns in the
 * order of first mention, numbers by value, text by bytes, missing last.
 */
export function contentOrder(layout: Layout): Statement[] {
  const columns = layout.columns.slice(0, layout.kept).map((_, c) => stored(layout, c));
  return [sql`event`, ...columns].map((column) => sql`${column} ASC NULLS LAST`);
}

/** The whole canonical order: variants by their place in the plan, then other names by text, then none. */
export function canonicalOrder(layout: Layout): Statement[] {
  return [
    sql`at_us ASC NULLS LAST`,
    sql`variant ASC NULLS LAST`,
    sql`other_variant ASC NULLS LAST`,
    ...contentOrder(layout),
  ];
}

/**
 * Reads   rows
 * Writes  copies: row_id, source, event_id, unit, place (1 is kept) and content columns, of ids that occur twice
 */
export function copies(layout: Layout, dialect: Dialect): Statement {
  const order = join(canonicalOrder(layout), ", ");
  // One 64-bit key of both, in order: nearly every id is a group of its own, and to sort them costs two thirds of grouping.
  const hash = dialect.hash(sql`event_id`, sql`source`);
  return sql`
    CREATE TEMP TABLE copies AS
    WITH repeated AS (
      SELECT DISTINCT hash
      FROM (
        SELECT hash, lag(hash) OVER (ORDER BY hash) AS before
        FROM (SELECT ${hash} AS hash FROM rows WHERE event_id IS NOT NULL AND fate <> ${FATE.rejected})
      )
      WHERE hash = before
    ), candidates AS (
      SELECT r.rowid AS row_id, r.*
      FROM rows AS r
      JOIN repeated AS d ON d.hash = ${hash}
      WHERE r.event_id IS NOT NULL AND r.fate <> ${FATE.rejected}
    )
    SELECT row_id, source, event_id, unit, at_us, variant, other_variant, ${join([sql`event`, ...storedColumns(layout)], ", ")},
      row_number() OVER (PARTITION BY source, event_id ORDER BY ${order}) AS place
    FROM candidates`;
}

/** Reads copies; writes the fate of all but the first. A copy is a duplicate whatever row filter it meets. */
export const markDuplicates = (): Statement =>
  sql`UPDATE rows SET fate = ${FATE.duplicate} WHERE rowid IN (SELECT row_id FROM copies WHERE place > 1)`;

/** One row: ids that occur twice, those of which copies differ in content or unit, those of which the unit differs. */
export function copyCounts(layout: Layout): Statement {
  return sql`
    SELECT count(*) FILTER (WHERE copies > 1) AS ids, count(*) FILTER (WHERE copies > 1 AND contents > 1) AS differing,
      count(*) FILTER (WHERE units > 1) AS other_units
    FROM (
      SELECT source, event_id, sum(copies) AS copies, count(*) AS contents, count(DISTINCT unit) AS units
      FROM (
        SELECT source, event_id, unit, count(*) AS copies
        FROM copies
        GROUP BY source, event_id, unit, at_us, variant, other_variant, ${join(content(layout), ", ")}
      )
      GROUP BY source, event_id
    )`;
}

function content(layout: Layout): Statement[] {
  return [sql`event`, ...layout.columns.slice(0, layout.ordered).map((_, c) => stored(layout, c))];
}
