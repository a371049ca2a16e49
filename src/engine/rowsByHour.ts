import type { Plan } from "../plan/index.ts";
import { count, type Engine, type Row, whole } from "./engine.ts";
import type { HourCount, RowsOfUnits } from "./hours.ts";
import type { Layout } from "./layout.ts";
import { type SourceSpan, spansOf } from "./logEnd.ts";
import { rowsByHour, rowsOfUnits, type TimeSpan } from "./sql/index.ts";

/** The span of every entry of the log, and its rows by hour. */
export async function hoursOfLog(
  layout: Layout,
  span: TimeSpan,
  engine: Engine,
): Promise<{ readonly spans: SourceSpan[]; readonly hours: HourCount[] }> {
  const bins = (await engine.query(rowsByHour(layout, span))).map((row) => ({
    ...hourCount(row),
    firstUs: whole(row, "first_us"),
    lastUs: whole(row, "last_us"),
    counted: row.counted === true,
  }));
  return { spans: spansOf(bins), hours: bins };
}

/** Rows of enrolled units by hour. */
export async function hoursOfUnits(plan: Plan, layout: Layout, span: TimeSpan, engine: Engine): Promise<RowsOfUnits[]> {
  const rows = await engine.query(rowsOfUnits(plan, layout, span));
  return rows.map((row) => ({
    ...hourCount(row),
    variant: count(row, "variant"),
    place: row.place === null ? null : Number(row.place),
  }));
}

const hourCount = (row: Row): HourCount => ({
  source: count(row, "source"),
  hour: count(row, "hour"),
  rows: count(row, "rows"),
});
