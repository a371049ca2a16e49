import { join, type Statement, sql } from "./sql.ts";

/** A pair (y, x) of each unit, and the key by which its arm's ends are found: at some value of it a variant. */
export interface KeyedPair {
  readonly key: Statement;
  readonly y: Statement;
  readonly x: Statement;
  readonly ends: readonly { readonly variant: number; readonly end: number; readonly at: Statement }[];
}

/** The pair of the unit at each end, of several the smallest pair. Gives part (place of the pair), variant, end, y, x. */
export function pairsAtEnds(pairs: readonly KeyedPair[]): Statement {
  const parts = pairs.flatMap(({ key, y, x, ends }, part) =>
    [...new Set(ends.map(({ end }) => end))].map((end) => {
      const own = ends.filter((one) => one.end === end);
      const cases = own.map(({ variant, at }) => sql`WHEN ${variant} THEN ${at}`);
      return sql`
        SELECT ${part} AS part, variant, ${end} AS end_of, min({'y': y, 'x': x}) AS pair
        FROM (SELECT variant, ${key} AS key, ${y} AS y, ${x} AS x FROM units)
        WHERE key = CASE variant ${join(cases, "\n")} END
        GROUP BY variant`;
    }),
  );
  return sql`SELECT part, variant, end_of, pair.y AS y, pair.x AS x FROM (${join(parts, "\nUNION ALL\n")})`;
}
