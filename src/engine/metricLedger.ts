import type { Plan } from "../plan/index.ts";
import { count, type Engine, nano, type Row } from "./engine.ts";
import { FATE, type Layout, type PartLayout, unitLineIds } from "./layout.ts";
import { rowLineId } from "./ledger.ts";
import { countedRows, metricRows, PLACE } from "./sql/index.ts";
import type { MetricLedger } from "./types.ts";

/** Rows of analysed units in follow-up that a metric's parts match, and those of them without a number. */
export interface CountedRows {
  readonly rows: number;
  readonly withoutNumber: number;
}

/**
 * The account of each metric's rows: the lines of the row ledger, restricted to what the metric's `of` matches; and what all
 * parts of it count.
 */
export async function metricLedgers(
  plan: Plan,
  layout: Layout,
  engine: Engine,
): Promise<{ readonly ledgers: MetricLedger[]; readonly counted: CountedRows[] }> {
  const parts = plan.metrics.map((metric, m) => {
    const part = layout.parts.find((one) => one.metric === m && one.side === "of");
    if (part === undefined) throw new Error(`no part of the metric ${metric.name}`);
    return part;
  });
  const distinct = parts.filter((part, i) => parts.findIndex((other) => isSame(part, other)) === i);
  const counting = plan.metrics.map((_, m) =>
    layout.parts.filter((part) => part.metric === m && part.side !== "before"),
  );
  const groups = await engine.query(metricRows(distinct, counting));
  const lines = linesOf(plan, layout);
  const inside = groups.filter((row) => lines.at(-1)?.holds(row));
  const counted = plan.metrics.map((_, m) => ({
    rows: sumOf(inside, `counted${m}`),
    withoutNumber: sumOf(inside, `numberless${m}`),
  }));
  const ledgers = plan.metrics.map(({ name }, m) => {
    const part = parts[m];
    const at = distinct.findIndex((other) => part !== undefined && isSame(part, other));
    return {
      metric: name,
      lines: lines.map(({ id, holds }) => {
        const own = groups.filter(holds);
        return {
          id,
          rows: sumOf(own, `rows${at}`),
          sum: part?.value == null ? null : own.reduce((sum, row) => sum + sumOrZero(row, `sum${at}`), 0n),
        };
      }),
    };
  });
  return { ledgers, counted };
}

const sumOf = (rows: readonly Row[], column: string) => rows.reduce((sum, row) => sum + count(row, column), 0);

const isSame = (a: PartLayout, b: PartLayout) => a.match === b.match && a.value === b.value;
const sumOrZero = (row: Row, column: string) => (row[column] == null ? 0n : nano(row, column));

/** Every line of the row ledger, in order, with the groups of rows that end on it. */
function linesOf(plan: Plan, layout: Layout): { id: string; holds: (row: Row) => boolean }[] {
  const fate = (wanted: number) => (row: Row) => Number(row.fate) === wanted;
  const ids = unitLineIds(plan);
  const onLine = (line: number) => (row: Row) => row.line !== null && Number(row.line) === line;
  const analysed = onLine(ids.length - 1);
  const place = (wanted: number) => (row: Row) => analysed(row) && Number(row.place) === wanted;
  return [
    { id: "rejected", holds: fate(FATE.rejected) },
    { id: "duplicate", holds: fate(FATE.duplicate) },
    ...layout.rowFilters.map((filter, i) => ({ id: `filter:${filter.name}`, holds: fate(FATE.firstFilter + i) })),
    ...ids.slice(0, -1).map((id, line) => ({ id: rowLineId(id), holds: onLine(line) })),
    { id: "before-enrolment", holds: place(PLACE.before) },
    { id: "after-follow-up", holds: place(PLACE.after) },
    { id: "in-follow-up", holds: place(PLACE.inside) },
  ];
}

/** What a metric's ledger counts must be what its units add up to. */
export async function refuseOtherCounts(
  plan: Plan,
  layout: Layout,
  ledgers: readonly MetricLedger[],
  engine: Engine,
): Promise<void> {
  const [rows = {}] = await engine.query(countedRows(layout));
  for (const [m, { name }] of plan.metrics.entries()) {
    const match = layout.parts.find((part) => part.metric === m && part.side === "of")?.match;
    const [inLedger, ofUnits] = [ledgers[m]?.lines.at(-1)?.rows, count(rows, `rows${match}`)];
    if (inLedger !== ofUnits) {
      throw new Error(`${name}: its ledger ends with ${inLedger} rows but its units have ${ofUnits}`);
    }
  }
}
