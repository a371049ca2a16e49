import type { Metric, Plan } from "../../src/plan/types.ts";
import { rowAt } from "./ledger.ts";
import { readDecimal, toNano } from "./number.ts";
import type { EndedRow } from "./oracle.ts";
import { partMatches } from "./span.ts";
import type { OracleMetric, Row } from "./types.ts";
import { rowLineIds } from "./units.ts";

/** The ledger of one metric: of every readable row that its `of` matches, the line it ended on, and what its column adds. */
export function metricLedger(
  plan: Plan,
  { of }: Metric,
  rows: readonly Row[],
  ended: readonly EndedRow[],
): OracleMetric["ledger"] {
  const matched = ended.filter(({ at }) => partMatches(of, rowAt(rows, at)));
  return rowLineIds(plan).map((id) => {
    const here = matched.filter(({ line }) => line === id).map(({ at }) => rowAt(rows, at));
    const { aggregate } = of;
    const sum =
      "column" in aggregate ? here.reduce((total, row) => total + numberOrZero(row, aggregate.column), 0n) : null;
    return { id, rows: here.length, sum };
  });
}

/** A rejected row may hold what is no number, or one out of range. */
function numberOrZero(row: Row, column: string): bigint {
  const value = readDecimal(row.cell(column) ?? "");
  const nano = value === null ? 0n : toNano(value);
  return nano === "out-of-range" ? 0n : nano;
}
