import type { Dialect } from "./dialect.ts";
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

/** A value of which `above` others are asked that exceed or equal it, if it is no smaller than a bound. */
export interface FromTop {
  readonly x: Statement;
  readonly bound: string;
  readonly above: bigint;
}

/** Gives place (of what was asked), x; no row where there is none. */
export function valuesFromTop(asked: readonly FromTop[], dialect: Dialect): Statement {
  return eachInOrder(
    asked.map(({ x, bound, above }) => ({
      values: sql`SELECT ${x} AS x FROM units WHERE ${x} >= CAST(${bound} AS ${dialect.sumType})`,
      order: sql`x DESC`,
      offset: above,
    })),
  );
}

/** The values at some ranks, each from the nearer end. Gives place (of what was asked), x. */
export function atEachRank(
  asked: readonly { readonly x: Statement; readonly rank: bigint; readonly n: bigint }[],
): Statement {
  return eachInOrder(
    asked.map(({ x, rank, n }) => ({
      values: sql`SELECT ${x} AS x FROM units WHERE ${x} IS NOT NULL`,
      order: rank * 2n > n ? sql`x DESC` : sql`x`,
      offset: rank * 2n > n ? n - rank : rank - 1n,
    })),
  );
}

function eachInOrder(
  asked: readonly { readonly values: Statement; readonly order: Statement; readonly offset: bigint }[],
): Statement {
  const places = asked.map(
    ({ values, order, offset }, place) =>
      sql`SELECT ${place} AS place, x FROM (${values} ORDER BY ${order} LIMIT 1 OFFSET ${offset})`,
  );
  return join(places, "\nUNION ALL\n");
}

const table = (metric: number): Statement => name(`ordered${metric}`);
