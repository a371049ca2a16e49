import { type ColumnTable, from, op, escape as rowwise } from "arquero";
import type { Plan } from "../../src/plan/types.ts";
import { canonicalOrder, differ } from "./order.ts";
import type { Row } from "./types.ts";
import { holds } from "./where.ts";

/** A row of the settled table. `line` is null while the row has not ended on a line. */
export interface SettledRow {
  readonly at: number;
  readonly unit: string | null;
  readonly rank: number;
  readonly line: string | null;
}

export interface Copies {
  readonly duplicateIds: number;
  readonly copiesThatDiffer: number;
  readonly copiesOfOtherUnits: number;
}

/**
 * Rules 2 to 4: rejected precedes duplicate precedes the row filters.
 * Columns: at (place in `rows`), unit, rank in canonical order, line.
 */
export function settleRows(plan: Plan, rows: readonly Row[]): ColumnTable {
  const rank = ranks(plan, rows);
  const start = from(
    rows.map((row, at) => ({
      at,
      unit: row.unit,
      rank: rank[at],
      rejected: row.rejected !== null,
      // Without an id a row is a copy of none: a key of its own.
      key: row.eventId === null ? `row ${at}` : `id ${row.source} ${row.eventId}`,
    })),
    ["at", "unit", "rank", "rejected", "key"],
  );
  const rejected = start.filter((row) => row.rejected).derive({ line: () => "rejected" });
  return copiesOf(start)
    .derive({ line: rowwise((row: { at: number; copy: number }) => lineOf(plan, rowAt(rows, row.at), row.copy)) })
    .ungroup()
    .concat(rejected)
    .select("at", "unit", "rank", "line");
}

/** Not rejected rows by event id, numbered in canonical order: the first copy is the one kept. */
function copiesOf(start: ColumnTable): ColumnTable {
  return start
    .filter((row) => !row.rejected)
    .orderby("rank")
    .groupby("key")
    .derive({ copy: op.row_number() });
}

function lineOf(plan: Plan, row: Row, copy: number): string | null {
  if (copy > 1) return "duplicate";
  const filter = plan.filters.find((candidate) => candidate.drop === "rows" && holds(candidate.where, row.cell));
  return filter === undefined ? null : `filter:${filter.name}`;
}

/** Ids with more than one not rejected row, and of these the ones whose copies differ, or differ in the unit. */
export function countCopies(plan: Plan, rows: readonly Row[]): Copies {
  const groups = from(
    rows.flatMap((row, at) =>
      row.rejected === null && row.eventId !== null ? [{ at, key: `id ${row.source} ${row.eventId}` }] : [],
    ),
    ["at", "key"],
  )
    .groupby("key")
    .rollup({ at: op.array_agg("at") })
    .objects() as { at: number[] }[];
  const copies = groups.map((group) => group.at.map((at) => rowAt(rows, at))).filter((group) => group.length > 1);
  const some = (test: (a: Row, b: Row) => boolean) =>
    copies.filter(([first, ...others]) => first !== undefined && others.some((other) => test(first, other))).length;
  return {
    duplicateIds: copies.length,
    copiesThatDiffer: some((a, b) => differ(plan, a, b)),
    copiesOfOtherUnits: some((a, b) => a.unit !== b.unit),
  };
}

/** Each row's place in canonical order; rejected rows come last, in no order that matters. */
function ranks(plan: Plan, rows: readonly Row[]): number[] {
  const order = canonicalOrder(plan);
  const kept = [...rows.keys()].filter((at) => rowAt(rows, at).rejected === null);
  kept.sort((a, b) => order(rowAt(rows, a), rowAt(rows, b)));
  const places = new Map(kept.map((at, place) => [at, place]));
  return rows.map((_, at) => places.get(at) ?? rows.length);
}

export function rowAt(rows: readonly Row[], at: number): Row {
  const row = rows[at];
  if (row === undefined) throw new Error(`no row ${at} of ${rows.length}`);
  return row;
}
