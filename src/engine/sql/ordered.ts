import { join, name, type Statement, sql } from "./sql.ts";

/**
 * The values of one metric in order, made when the first order statistic of it is asked for: sorting once and looking a
 * place up costs a hundredth of a sort for each rank.
 * Reads   units
 * Writes  ordered<m>: variant, place (from 1 within the variant, the smallest first), x
 */
export function ordered(metric: number, x: Statement): Statement {
  return sql`
    CREATE TEMP TABLE ${table(metric)} AS
    SELECT variant, row_number() OVER (PARTITION BY variant ORDER BY x) AS place, x
    FROM (SELECT variant, ${x} AS x FROM units)
    WHERE x IS NOT NULL`;
}

/** Gives place and x at some ranks of one variant. */
export function atRanks(metric: number, variant: number, ranks: readonly number[]): Statement {
  const places = ranks.map((rank) => sql`${rank}`);
  return sql`SELECT place, x FROM ${table(metric)} WHERE variant = ${variant} AND place IN (${join(places, ", ")})`;
}

const table = (metric: number): Statement => name(`ordered${metric}`);
