import type { EndedUnits, SoundnessFacts } from "../../src/engine/soundnessTypes.ts";
import type { ByVariant, ValueCount } from "../../src/engine/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import { silencesOf, sourcesOf } from "./hours.ts";
import { enrolledOf, levelOf, levelsOf } from "./levels.ts";
import { nanoText } from "./number.ts";
import { compareText } from "./order.ts";
import { partMatches, partsOf } from "./span.ts";
import type { Clock } from "./time.ts";
import type { Row } from "./types.ts";
import { enrols, followUpEnd, type Unit, unitLineIds } from "./units.ts";

/** A row, and the line of the ledger on which it ended. */
export interface Ended {
  readonly row: Row;
  readonly line: string;
}

/** METHODS 7: what the checks look at, from rows and units one by one. */
export function soundnessOf(
  plan: Plan,
  ended: readonly Ended[],
  units: readonly Unit[],
  end: bigint | null,
  clock: Clock,
): SoundnessFacts {
  const hasTime = plan.log.every(({ columns }) => columns.time !== null);
  const enrolled = enrolledOf(units);
  const days = [...new Set(enrolled.flatMap(({ enrolledUs: us }) => (us === null ? [] : [clock.day(us)])))];
  return {
    days: hasTime
      ? days
          .sort((a, b) => a - b)
          .map((day) => ({
            day,
            ...endedUnits(
              plan,
              enrolled.filter(({ enrolledUs: us }) => us !== null && clock.day(us) === day),
            ),
          }))
      : null,
    levels: plan.subgroups.map((column) => byLevel(plan, column, enrolled)),
    beforeLines: beforeLines(plan, ended),
    enrolling: enrolling(plan, ended),
    byMetricRows: byMetricRows(plan, enrolled),
    keptUnfollowed:
      plan.followUp?.incomplete === "keep" && end !== null
        ? countOf(
            plan,
            units.filter(
              ({ line, enrolledUs: us }) => line === "analysed" && us !== null && followUpEnd(plan, us) > end,
            ),
          )
        : null,
    valuesOfFilters: valuesOfFilters(plan, ended, units),
    sources: hasTime ? sourcesOf(plan, ended, enrolled, clock) : [],
    silences: hasTime ? silencesOf(plan, ended, enrolled) : [],
  };
}

const countOf = (plan: Plan, units: readonly Pick<Unit, "variant">[]): ByVariant =>
  plan.variants.map((_, v) => units.filter(({ variant }) => variant === v).length);

function endedUnits(plan: Plan, units: readonly Unit[]): EndedUnits {
  const lines = unitLineIds(plan);
  return {
    ended: lines.slice(lines.indexOf("unknown-variant") + 1).map((id) =>
      countOf(
        plan,
        units.filter(({ line }) => line === id),
      ),
    ),
  };
}

function byLevel(plan: Plan, column: string, enrolled: readonly Unit[]): EndedUnits[] {
  const { levels } = levelsOf(plan, column, enrolled);
  const named = levels.flatMap(({ level }) => (level.kind === "value" ? [level.text] : []));
  return levels.map(({ level }) =>
    endedUnits(
      plan,
      enrolled.filter((unit) => {
        const own = levelOf(plan, column, unit);
        if (level.kind === "value") return own === level.text;
        return level.kind === "missing" ? own === null : own !== null && !named.includes(own);
      }),
    ),
  );
}

const rowFilters = (plan: Plan) =>
  plan.filters.filter(({ drop }) => drop === "rows").map(({ name }) => `filter:${name}`);

/** The same log once more, with no row taken by a line or any after it. */
function beforeLines(plan: Plan, ended: readonly Ended[]): SoundnessFacts["beforeLines"] {
  const lines = ["rejected", "duplicate", ...rowFilters(plan)];
  return lines.map((line, i) => {
    const left = ended.filter((one) => !lines.slice(0, i).includes(one.line)).map(({ row }) => row);
    return { line, byVariant: countOf(plan, firstEnrolments(plan, left)) };
  });
}

function firstEnrolments(plan: Plan, rows: readonly Row[]): { variant: number }[] {
  const isTimed = plan.log.every(({ columns }) => columns.time !== null);
  const first = new Map<string, Row>();
  for (const row of rows) {
    if (row.unit === null || !enrols(plan, row) || (isTimed && row.us === null)) continue;
    const known = first.get(row.unit);
    if (known === undefined || isEarlier(row, known)) first.set(row.unit, row);
  }
  const { fromUs, beforeUs } = plan.enrolment;
  return [...first.values()].flatMap(({ us, variantIndex }) => {
    const isOutside = us !== null && ((fromUs !== null && us < fromUs) || (beforeUs !== null && us >= beforeUs));
    return isOutside || variantIndex === null || variantIndex < 0 ? [] : [{ variant: variantIndex }];
  });
}

/** Of what follows time and variant in canonical order nothing is asked here, and a rejected row may not have it. */
function isEarlier(a: Row, b: Row): boolean {
  const place = ({ variantIndex }: Row) =>
    variantIndex === null || variantIndex < 0 ? Number.POSITIVE_INFINITY : variantIndex;
  return a.us === b.us || a.us === null || b.us === null ? place(a) < place(b) : a.us < b.us;
}

function enrolling(plan: Plan, ended: readonly Ended[]): SoundnessFacts["enrolling"] {
  const reach = ended.filter(({ row, line }) => line !== "rejected" && line !== "duplicate" && enrols(plan, row));
  const unitsOf = (rows: readonly Ended[]) =>
    plan.variants.map(
      (_, v) => new Set(rows.filter(({ row }) => row.variantIndex === v).map(({ row }) => row.unit)).size,
    );
  return {
    units: unitsOf(reach),
    taken: rowFilters(plan).map((id) => unitsOf(reach.filter(({ line }) => line === id))),
  };
}

const SHOWN = 5;

function byMetricRows(plan: Plan, enrolled: readonly Unit[]): SoundnessFacts["byMetricRows"] {
  if (plan.enrolment.event !== null || plan.log.every(({ columns }) => columns.event === null)) return null;
  const counted = enrolled.flatMap(({ enrolling: row }) =>
    row !== null && partsOf(plan).some((part) => partMatches(part, row)) ? [row] : [],
  );
  return {
    units: counted.length,
    events: commonest(
      counted.map(({ event }) => event),
      compareText,
    ),
  };
}

function commonest(values: readonly (string | null)[], order: (a: string, b: string) => number): ValueCount[] {
  const counts = new Map<string, number>();
  for (const value of values) if (value !== null) counts.set(value, (counts.get(value) ?? 0) + 1);
  return [...counts]
    .map(([value, rows]) => ({ value, rows }))
    .sort((a, b) => b.rows - a.rows || order(a.value, b.value))
    .slice(0, SHOWN);
}

function valuesOfFilters(
  plan: Plan,
  ended: readonly Ended[],
  units: readonly Unit[],
): SoundnessFacts["valuesOfFilters"] {
  const rows = ended.filter(({ line }) => line !== "rejected").map(({ row }) => row);
  return plan.filters.flatMap((filter) => {
    const id = `filter:${filter.name}`;
    if (!("where" in filter) || [...ended, ...units].some(({ line }) => line === id)) return [];
    const columns = [...new Set(filter.where.map(({ column }) => column))].filter(
      (column) => !plan.log.some(({ columns: own }) => own.unit === column || own.eventId === column),
    );
    return [
      {
        filter: filter.name,
        columns: columns.map((column) => {
          if (!plan.numericColumns.includes(column))
            return {
              column,
              values: commonest(
                rows.map((row) => row.cell(column)),
                compareText,
              ),
            };
          const numbers = rows.map((row) => row.number(column));
          const texts = numbers.map((value) => (value === null ? null : nanoText(value)));
          return { column, values: commonest(texts, (a, b) => Number(a) - Number(b)) };
        }),
      },
    ];
  });
}
