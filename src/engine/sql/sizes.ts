import type { Dialect } from "./dialect.ts";
import { join, type Statement, sql } from "./sql.ts";

/**
 * The shape of the values: units by arm, sign and size of each value, 0 apart.
 * Reads   units
 * Gives   part, variant, sign (-1, 0, 1), class (NULL for 0), units
 * @param values one or more; over as many units as have it
 */
export function sizes(values: readonly Statement[], dialect: Dialect): Statement {
  const parts = values.map(
    (x, part) => sql`
    SELECT ${part} AS part, variant, CASE WHEN x > 0 THEN 1 WHEN x < 0 THEN -1 ELSE 0 END AS sign,
      CASE WHEN x <> 0 THEN ${dialect.sizeClass(sql`x`)} END AS class, count(*) AS units
    FROM (SELECT variant, ${x} AS x FROM units)
    WHERE x IS NOT NULL
    GROUP BY 1, 2, 3, 4`,
  );
  return sql`SELECT part, variant, sign, class, units FROM (${join(parts, "\nUNION ALL\n")})
    ORDER BY part, variant, sign, class`;
}
