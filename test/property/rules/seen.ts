import type { ColumnTest, Part, Plan, Where } from "../../../src/plan/types.ts";
import type { EndedRow, Trace } from "../../oracle/oracle.ts";
import type { RawFile, Row } from "../../oracle/types.ts";

/** One random log and all that became of it. */
export interface Seen {
  readonly plan: Plan;
  readonly trace: Trace;
  readonly files: readonly RawFile[];
}

/** A rule by its name, and how often a log came by it (true is once). */
export type Rules = Readonly<Record<string, (seen: Seen) => number | boolean>>;

/** Rows with the line they ended on. */
export function endedRows({ trace }: Seen): (EndedRow & { readonly row: Row })[] {
  return trace.ended.map((ended) => {
    const row = trace.rows[ended.at];
    if (row === undefined) throw new Error(`an ended row that was not read: ${ended.at}`);
    return { ...ended, row };
  });
}

/** Rows that neither rejection, duplicates nor a row filter took. */
export function survivors(seen: Seen): Row[] {
  return endedRows(seen)
    .filter(({ line }) => line !== "rejected" && line !== "duplicate" && !line.startsWith("filter:"))
    .map(({ row }) => row);
}

export function count<T>(items: readonly T[], test: (item: T) => boolean): number {
  return items.filter(test).length;
}

export function parts({ plan }: Seen): Part[] {
  return plan.metrics.flatMap(({ of, per }) => (per === null ? [of] : [of, per]));
}

/** Every test of every `where` of the plan. */
export function tests({ plan }: Seen): ColumnTest[] {
  const wheres: Where[] = [
    ...plan.filters.flatMap((filter) => ("where" in filter ? [filter.where] : [])),
    ...plan.metrics.flatMap(({ of, per }) => [of.where, per?.where ?? []]),
  ];
  return wheres.flat();
}
