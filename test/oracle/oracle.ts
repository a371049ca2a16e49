import { type ColumnTable, op, escape as rowwise } from "arquero";
import type { Plan } from "../../src/plan/types.ts";
import { countCopies, rowAt, type SettledRow, settleRows } from "./ledger.ts";
import { enrolledOf, levelOf, levelsOf } from "./levels.ts";
import { metricLedger } from "./metric-ledger.ts";
import { byVariant, metricOf } from "./metrics.ts";
import { ascending } from "./number.ts";
import { readRows } from "./rows.ts";
import { soundnessOf } from "./soundness.ts";
import { logEnd, partsOf } from "./span.ts";
import { type Clock, clockOf } from "./time.ts";
import type { Lists, OracleFacts, OracleResult, RawFile, Row } from "./types.ts";
import { followUpEnd, isIn, rowLineIds, seeUnits, type Unit, unitLineIds } from "./units.ts";

/** A row that has ended: on which line, and of what place in canonical order. */
export interface EndedRow {
  readonly at: number;
  readonly unit: string | null;
  readonly rank: number;
  readonly line: string;
}

/** The steps on the way, for those who count which rules a log came by. */
export interface Trace {
  readonly clock: Clock;
  readonly rows: readonly Row[];
  readonly ended: readonly EndedRow[];
  readonly units: readonly Unit[];
  readonly result: OracleResult;
}

/** The whole reduction from raw rows, by DESIGN 4, with nothing of the engine's. */
export function oracle(plan: Plan, files: readonly RawFile[], lists: Lists): OracleResult {
  return trace(plan, files, lists).result;
}

export function trace(plan: Plan, files: readonly RawFile[], lists: Lists): Trace {
  const clock = clockOf(plan.timezone);
  const rows = readRows(plan, files, clock);
  const settled = settleRows(plan, rows);
  const end = logEnd(plan, rows);
  const units = seeUnits(plan, rows, settled, end, lists);
  const endedTable = endRows(plan, rows, settled, units);
  const ended = endedTable.objects() as EndedRow[];
  const unreadable = files.reduce((sum, file) => sum + file.unreadable, 0);
  const analysed = units.filter(({ line }) => line === "analysed");
  const counted = endedTable.filter((row) => row.line === "in-follow-up");
  const before = endedTable.filter((row) => row.line === "before-enrolment");
  const rowsOn = counts(endedTable);

  const result: OracleResult = {
    rowsRead: rows.length + unreadable,
    rowLines: rowLineIds(plan).map((id) => ({
      id,
      rows: (rowsOn.get(id) ?? 0) + (id === "rejected" ? unreadable : 0),
    })),
    unitsSeen: units.length,
    unitLines: unitLineIds(plan).map((id) => {
      const here = units.filter(({ line }) => line === id);
      const nameless = id === "not-enrolled" || id === "unknown-variant";
      return { id, units: here.length, byVariant: nameless ? null : countUnits(plan, here) };
    }),
    facts: { ...factsOf(plan, rows, ended, units, end, clock), analysedByDay: byDay(plan, analysed, clock) },
    metrics: plan.metrics.map((metric) => ({
      ...metricOf(plan, metric, rows, { counted, before }, analysed, clock, end),
      ledger: metricLedger(plan, metric, rows, ended),
    })),
    places: placesOf(plan, units, analysed, clock),
  };
  return { clock, rows, ended, units, result };
}

/** The rows that neither rejection, duplicates nor a filter took end by their unit's line, or by their time. */
function endRows(plan: Plan, rows: readonly Row[], settled: ColumnTable, units: readonly Unit[]): ColumnTable {
  const known = new Map(units.map((unit) => [unit.unit, unit]));
  const lineOf = (row: SettledRow): string => {
    if (row.line !== null) return row.line;
    const unit = row.unit === null ? undefined : known.get(row.unit);
    if (unit === undefined) throw new Error(`a surviving row has no seen unit: ${row.unit}`);
    return unit.line === "analysed" ? timeLine(plan, rowAt(rows, row.at).us, unit.enrolledUs) : `unit-${unit.line}`;
  };
  return settled.derive({ line: rowwise(lineOf) });
}

/** Follow-up is [enrolment, enrolment + days x 24 h); a log without time is all follow-up. */
function timeLine(plan: Plan, us: bigint | null, enrolledUs: bigint | null): string {
  if (us === null || enrolledUs === null) return "in-follow-up";
  if (us < enrolledUs) return "before-enrolment";
  return plan.followUp !== null && us >= followUpEnd(plan, enrolledUs) ? "after-follow-up" : "in-follow-up";
}

function counts(ended: ColumnTable): Map<string, number> {
  const lines = ended.groupby("line").rollup({ rows: op.count() }).objects() as { line: string; rows: number }[];
  return new Map(lines.map(({ line, rows }) => [line, rows]));
}

function factsOf(
  plan: Plan,
  rows: readonly Row[],
  ended: readonly EndedRow[],
  units: readonly Unit[],
  end: bigint | null,
  clock: Clock,
): Omit<OracleFacts, "analysedByDay"> {
  const enrolled = enrolledOf(units);
  const unitsOn = (line: string) => new Set(ended.filter((row) => row.line === line).map(({ unit }) => unit));
  const rejected = unitsOn("rejected");
  const duplicate = unitsOn("duplicate");
  const times = units
    .flatMap(({ line, enrolledUs }) => (line === "analysed" && enrolledUs !== null ? [enrolledUs] : []))
    .sort(ascending);
  const events = [plan.enrolment.event, ...partsOf(plan).map(({ event }) => event)].filter((event) => event !== null);
  return {
    enrolled: countUnits(plan, enrolled),
    withRejected: countUnits(
      plan,
      enrolled.filter(({ unit }) => rejected.has(unit)),
    ),
    withDuplicate: countUnits(
      plan,
      enrolled.filter(({ unit }) => duplicate.has(unit)),
    ),
    switched: countUnits(
      plan,
      enrolled.filter(({ switched }) => switched),
    ),
    ...countCopies(plan, rows),
    missingEvents: [...new Set(events)].filter((event) => !rows.some((row) => row.event === event)),
    missingVariants: plan.variants.map(({ name }) => name).filter((name) => !rows.some((row) => row.variant === name)),
    firstEnrolledUs: times[0] ?? null,
    lastEnrolledUs: times.at(-1) ?? null,
    logEndUs: end,
    subgroups: plan.subgroups.map((column) => levelsOf(plan, column, enrolled)),
    soundness: soundnessOf(
      plan,
      ended.map(({ at, line }) => ({ row: rowAt(rows, at), line })),
      units,
      end,
      clock,
    ),
    inIncidents: plan.incidents.map((incident) =>
      countUnits(
        plan,
        units.filter((unit) => unit.line === "analysed" && isIn(incident, unit)),
      ),
    ),
  };
}

/** Where each analysed unit stands among the days and the levels of the enrolled. */
function placesOf(plan: Plan, units: readonly Unit[], analysed: readonly Unit[], clock: Clock): OracleResult["places"] {
  const columns = plan.subgroups.map((column) => levelsOf(plan, column, enrolledOf(units)));
  return new Map(
    analysed.map((unit) => [
      unit.unit,
      {
        day: unit.enrolledUs === null ? null : clock.day(unit.enrolledUs),
        levels: columns.map(({ column, levels }) => {
          const own = levelOf(plan, column, unit);
          const named = levels.findIndex(({ level }) => level.kind === "value" && level.text === own);
          if (named >= 0) return named;
          return levels.findIndex(({ level }) => level.kind === (own === null ? "missing" : "rest"));
        }),
      },
    ]),
  );
}

/** Units by the local day of their enrolment. */
function byDay(plan: Plan, units: readonly Unit[], clock: Clock): OracleFacts["analysedByDay"] {
  const dayOf = ({ enrolledUs }: Unit) => (enrolledUs === null ? null : clock.day(enrolledUs));
  const days = [...new Set(units.map(dayOf))].filter((day) => day !== null).sort((a, b) => a - b);
  return days.map((day) => ({
    day,
    units: countUnits(
      plan,
      units.filter((unit) => dayOf(unit) === day),
    ),
  }));
}

function countUnits(plan: Plan, units: readonly Unit[]): number[] {
  return byVariant(plan, (variant) => units.filter((unit) => unit.variant === variant).length);
}
