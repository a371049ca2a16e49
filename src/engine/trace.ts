import type { Plan, PlanSource, Problem } from "../plan/index.ts";
import { count, type Engine, nano, type Row, text, textOrNull, whole, wholeOrNull } from "./engine.ts";
import { enrolUnits } from "./enrolUnits.ts";
import { FATE, type Layout, unitLineIds } from "./layout.ts";
import { reasonText, rowLineId } from "./ledger.ts";
import { duckdb, nearestUnit, PLACE, rowsOfUnit, unitEnd } from "./sql/index.ts";
import { type ReduceOptions, withLog } from "./withLog.ts";

/** All that became of one unit: for the terminal, never for a file. */
export interface UnitTrace {
  readonly unit: string;
  /** The line of the unit ledger; null where none of its rows outlasts rejection, duplicates and row filters. */
  readonly line: string | null;
  /** Place in the plan's variants, their number for a name that the plan lacks; null where it never enrolled. */
  readonly variant: number | null;
  readonly enrolledUs: bigint | null;
  readonly switched: boolean;
  readonly logEndUs: bigint | null;
  /** The columns that metrics take a value of. */
  readonly columns: readonly string[];
  readonly rows: readonly TracedRow[];
}

export interface TracedRow {
  readonly atUs: bigint | null;
  /** Of the input, as the plan's folder sees it. */
  readonly file: string;
  readonly event: string | null;
  readonly variant: string | null;
  /** Whether it is the row that enrolled the unit. */
  readonly enrolled: boolean;
  /** The line of the row ledger. */
  readonly line: string;
  /** Why it was rejected; null for any other row. */
  readonly reason: string | null;
  /** In 10^-9, one a column of `columns`; null where the row holds none. */
  readonly values: readonly (bigint | null)[];
  /** The metrics that count it: names, in plan order. */
  readonly countedIn: readonly string[];
}

/** No row of the log has the unit. */
export interface NoSuchUnit {
  /** The id that is spelt most like it; null of a log without ids. */
  readonly nearest: string | null;
}

/**
 * Reads a plan's log as the report does, and follows one unit through it.
 * @throws UnusableLog when the log is there but cannot be used
 */
export function traceUnit(
  planned: Plan | null,
  source: PlanSource,
  folder: string,
  unit: string,
  options: ReduceOptions,
): Promise<UnitTrace | NoSuchUnit | { problems: readonly Problem[] }> {
  return withLog(planned, source, folder, options, async (plan, opened) => {
    const { engine, log } = opened;
    const { layout, logEndUs, fingerprints, stage } = await enrolUnits(plan, folder, opened, duckdb, options);
    const columns = [...new Set(layout.parts.flatMap(({ value }) => (value === null ? [] : [value])))];
    const rows = await engine.query(rowsOfUnit(plan, layout, columns, unit));
    if (rows.length === 0) return { nearest: await nearestOf(unit, engine) };
    const [end] = await engine.query(unitEnd(unit));
    // A compressed file that ends early is only noticed there.
    await fingerprints;
    stage("done", 1);
    const enrolling = end === undefined ? -1 : rows.findIndex((row) => hasEnrolled(row, end));
    return {
      unit,
      line: end === undefined ? null : (unitLineIds(plan)[count(end, "line")] ?? null),
      variant: end === undefined || end.variant === null ? null : count(end, "variant"),
      enrolledUs: end === undefined ? null : wholeOrNull(end, "enrolled_us"),
      switched: end?.switched === true,
      logEndUs,
      columns: columns.map((column) => layout.columns[column] ?? ""),
      rows: rows.map((row, at) => ({
        ...tracedRow(plan, layout, columns, row),
        file: log.files[count(row, "file")]?.name ?? "",
        enrolled: at === enrolling,
      })),
    };
  });
}

async function nearestOf(unit: string, engine: Engine): Promise<string | null> {
  const [nearest] = await engine.query(nearestUnit(unit, duckdb));
  return nearest === undefined ? null : text(nearest, "unit");
}

/** The first such row in canonical order enrolled the unit. */
function hasEnrolled(row: Row, end: Row): boolean {
  return (
    Number(row.fate) === FATE.seen &&
    row.enrols === true &&
    row.variant !== null &&
    Number(row.variant) === Number(end.variant) &&
    (row.at_us === null || (end.enrolled_us !== null && whole(row, "at_us") === whole(end, "enrolled_us")))
  );
}

function tracedRow(plan: Plan, layout: Layout, columns: readonly number[], row: Row) {
  const line = lineOf(plan, layout, row);
  const variant = wholeOrNull(row, "variant");
  return {
    atUs: wholeOrNull(row, "at_us"),
    event: textOrNull(row, "event"),
    variant: variant === null ? null : (plan.variants[Number(variant)]?.name ?? textOrNull(row, "other_variant")),
    line,
    reason: line === "rejected" ? reasonText(count(row, "reason"), layout) : null,
    values: columns.map((column) => (row[`v${column}`] == null ? null : nano(row, `v${column}`))),
    countedIn: line === "in-follow-up" ? countedIn(plan, layout, row) : [],
  };
}

function lineOf(plan: Plan, layout: Layout, row: Row): string {
  const fate = count(row, "fate");
  if (fate === FATE.rejected) return "rejected";
  if (fate === FATE.duplicate) return "duplicate";
  if (fate >= FATE.firstFilter) return `filter:${layout.rowFilters[fate - FATE.firstFilter]?.name}`;
  const ids = unitLineIds(plan);
  const line = count(row, "line");
  if (line < ids.length - 1) return rowLineId(ids[line] ?? "");
  const place = count(row, "place");
  return place === PLACE.before ? "before-enrolment" : place === PLACE.after ? "after-follow-up" : "in-follow-up";
}

function countedIn(plan: Plan, layout: Layout, row: Row): string[] {
  return plan.metrics.flatMap(({ name }, m) =>
    layout.parts.some((part) => part.metric === m && part.side !== "before" && row[`m${part.match}`] === true)
      ? [name]
      : [],
  );
}
