import type { Plan } from "../../plan/types.ts";
import type { Layout } from "../layout.ts";
import type { Dialect } from "./dialect.ts";
import { canonicalOrder } from "./duplicates.ts";
import { placeOf } from "./matched.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/** What a person asks about one unit. All read tables of the stages up to the enrolments; none writes. */

/**
 * Every row of a unit, in canonical order, rejected ones without a time last.
 * Gives   file, at_us, event, variant, other_variant, enrols, fate, reason, line, place, the metrics' columns v<c> and conditions m<i>
 */
export function rowsOfUnit(plan: Plan, layout: Layout, columns: readonly number[], unit: string): Statement {
  return sql`
    SELECT ${join(
      [
        sql`file, at_us, event, variant, other_variant, enrols, fate, reason`,
        sql`line, place`,
        ...columns.map((column) => name(`v${column}`)),
        ...layout.matches.map((_, i) => name(`m${i}`)),
      ],
      ", ",
    )}
    FROM (
      SELECT r.*, e.line, ${placeOf(plan, layout)} AS place
      FROM rows AS r
      LEFT JOIN enrolments AS e ON e.unit = r.unit
      WHERE r.unit = ${unit}
    )
    ORDER BY ${join([...canonicalOrder(layout), sql`fate, file`], ", ")}`;
}

/** Where a unit ended; no row where none of its rows outlasts rejection, duplicates and row filters. */
export const unitEnd = (unit: string): Statement => sql`
  SELECT line, variant, enrolled_us, switched FROM enrolments WHERE unit = ${unit}`;

/** The unit whose id is spelt most like a text; of equally near ones the first by its bytes. */
export const nearestUnit = (unit: string, dialect: Dialect): Statement => sql`
  SELECT unit
  FROM rows
  WHERE unit IS NOT NULL
  GROUP BY unit
  ORDER BY ${dialect.editDistance(sql`lower(unit)`, sql`lower(${unit})`)}, unit
  LIMIT 1`;
