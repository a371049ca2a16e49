import type { Plan } from "../plan/index.ts";
import { NO_UNIT } from "../words/index.ts";
import { count, type Engine, type Row, text, wholeOrNull } from "./engine.ts";
import type { RowsOfUnits } from "./hours.ts";
import { FATE, type Layout, unitLineIds } from "./layout.ts";
import {
  analysedByDay,
  copyCounts,
  enrolledByVariant,
  enrolmentRange,
  eventCounts,
  eventsThatOccur,
  otherVariantCounts,
  PLACE,
  REASON,
  rowsByFate,
  rowsByFile,
  rowsByReason,
  unitsByLine,
  unitsInIncidents,
  unitsWithFate,
  valueList,
  variantCounts,
} from "./sql/index.ts";
import type { ByVariant, Facts, Reduction, ValueCount } from "./types.ts";

type Ledger = Pick<Reduction, "rowsRead" | "rowLines" | "unitsSeen" | "unitLines" | "rejectReasons">;

/** The account of all rows and units (DESIGN 7, flow), from counts of the stages; it must add up. */
export async function ledger(
  plan: Plan,
  layout: Layout,
  rowsOfUnits: readonly RowsOfUnits[],
  engine: Engine,
): Promise<Ledger> {
  const fates = await engine.query(rowsByFate());
  const lines = await engine.query(unitsByLine());
  const rowsOf = (fate: number) =>
    sumOf(
      fates.filter((row) => Number(row.fate) === fate),
      "rows",
    );
  const ids = unitLineIds(plan);
  const rowsOfLine = (id: string) =>
    sumOf(
      lines.filter((row) => Number(row.line) === ids.indexOf(id)),
      "rows",
    );

  // Without time each row of an analysed unit is in follow-up.
  const inPlace = (place: number) =>
    layout.hasTime
      ? rowsOfUnits.reduce((sum, group) => sum + (group.place === place ? group.rows : 0), 0)
      : place === PLACE.inside
        ? rowsOfLine("analysed")
        : 0;

  const rowLines = [
    { id: "rejected", rows: rowsOf(FATE.rejected) },
    { id: "duplicate", rows: rowsOf(FATE.duplicate) },
    ...layout.rowFilters.map((filter, i) => ({ id: `filter:${filter.name}`, rows: rowsOf(FATE.firstFilter + i) })),
    ...ids.slice(0, -1).map((id) => ({ id: rowLineId(id), rows: rowsOfLine(id) })),
    { id: "before-enrolment", rows: inPlace(PLACE.before) },
    { id: "after-follow-up", rows: inPlace(PLACE.after) },
    { id: "in-follow-up", rows: inPlace(PLACE.inside) },
  ];
  const rowsRead = sumOf(fates, "rows");
  const accounted = rowLines.reduce((sum, line) => sum + line.rows, 0);
  if (accounted !== rowsRead) throw new Error(`row lines add up to ${accounted} but ${rowsRead} rows were read`);

  return {
    rowsRead,
    rowLines,
    unitsSeen: sumOf(lines, "units"),
    unitLines: ids.map((id, line) => {
      const own = lines.filter((row) => Number(row.line) === line);
      const isNamed = id !== "not-enrolled" && id !== "unknown-variant";
      return { id, units: sumOf(own, "units"), byVariant: isNamed ? byVariant(plan, own, "units") : null };
    }),
    rejectReasons: commonReasons(await engine.query(rowsByReason()), layout),
  };
}

/** The row ledger's line for the rows of units on one of theirs. */
export const rowLineId = (unitLine: string) =>
  unitLine.startsWith("filter:") ? `unit-filter:${unitLine.slice("filter:".length)}` : `unit-${unitLine}`;

/**
 * Rejected rows by reason, commonest first. A record that cannot be read is one reason: what is wrong with it is told in
 * other words for each format, and the same rows must be told alike in any.
 */
function commonReasons(rows: readonly Row[], layout: Layout): { reason: string; rows: number }[] {
  const counts = new Map<string, number>();
  for (const row of rows) {
    const reason = count(row, "reason");
    const words = UNREADABLE.includes(reason) ? "cannot be read" : reasonText(reason, layout);
    counts.set(words, (counts.get(words) ?? 0) + count(row, "rows"));
  }
  return [...counts]
    .map(([reason, found]) => ({ reason, rows: found }))
    .sort((a, b) => b.rows - a.rows || (a.reason < b.reason ? -1 : 1));
}
const UNREADABLE: readonly number[] = [REASON.unreadable, REASON.notText, REASON.notObject, REASON.tooLong];

/** Why a row was rejected, in words; the reader of rejects.csv sees them. */
export function reasonText(reason: number, layout: Layout): string {
  if (reason === REASON.unreadable) return "cannot be read: the cells do not fit the header";
  if (reason === REASON.notText) return "cannot be read: not UTF-8";
  if (reason === REASON.notObject) return "cannot be read: not a JSON object";
  if (reason === REASON.tooLong) return "cannot be read: longer than 4 MB";
  if (reason === REASON.noUnit) return NO_UNIT;
  if (reason === REASON.noTime) return "no readable time";
  const isRange = reason >= REASON.outOfRange;
  const column = layout.columns[reason - (isRange ? REASON.outOfRange : REASON.notNumber)];
  if (column === undefined) throw new Error(`no words for reason ${reason}`);
  return isRange ? `out of range: ${column}` : `not a number: ${column}`;
}

type CountedFacts = Omit<Facts, "soundness" | "subgroups" | "subgroupsAfterwards">;

/** What the checks look at. */
export async function facts(
  plan: Plan,
  layout: Layout,
  engine: Engine,
  logEndUs: bigint | null,
): Promise<CountedFacts> {
  const ids = unitLineIds(plan);
  const unknown = ids.indexOf("unknown-variant");
  const enrolled = await engine.query(enrolledByVariant(unknown));
  const rejected = await engine.query(unitsWithFate(FATE.rejected, unknown));
  const duplicated = await engine.query(unitsWithFate(FATE.duplicate, unknown));
  const copied = layout.hasEventId ? (await engine.query(copyCounts(layout)))[0] : undefined;
  const [range = {}] = await engine.query(enrolmentRange(ids.length - 1));
  const [kept = {}] = await engine.query(enrolmentRange(ids.length - (plan.followUp === null ? 1 : 2)));
  const named = await engine.query(variantCounts());
  const others = await engine.query(otherVariantCounts(VALUES_KEPT));
  const days = layout.hasTime ? await engine.query(analysedByDay()) : [];
  const events = (await engine.query(eventCounts(VALUES_KEPT))).map((row) => ({
    value: text(row, "value"),
    rows: count(row, "rows"),
  }));
  const rowsNaming = (variant: number) => named.find((row) => Number(row.variant) === variant);
  const variants = [
    ...plan.variants.flatMap((variant, i) => {
      const row = rowsNaming(i);
      return row === undefined ? [] : [{ value: variant.name, rows: count(row, "rows") }];
    }),
    ...others.map((row) => ({ value: text(row, "value"), rows: count(row, "rows") })),
  ];
  return {
    enrolled: byVariant(plan, enrolled, "units"),
    withRejected: byVariant(plan, rejected, "units"),
    withDuplicate: byVariant(plan, duplicated, "units"),
    switched: byVariant(plan, enrolled, "switched"),
    duplicateIds: copied === undefined ? 0 : count(copied, "ids"),
    copiesThatDiffer: copied === undefined ? 0 : count(copied, "differing"),
    copiesOfOtherUnits: copied === undefined ? 0 : count(copied, "other_units"),
    hasEventId: layout.hasEventId,
    events,
    variants: variants.sort((a, b) => b.rows - a.rows || (a.value < b.value ? -1 : 1)).slice(0, VALUES_KEPT),
    missingEvents: await missingEvents(plan, events, engine),
    missingVariants: plan.variants.filter((_, i) => rowsNaming(i) === undefined).map((variant) => variant.name),
    firstEnrolledUs: layout.hasTime ? wholeOrNull(range, "first_us") : null,
    lastEnrolledUs: layout.hasTime ? wholeOrNull(range, "last_us") : null,
    logEndUs,
    analysedByDay: [...new Set(days.map((row) => count(row, "day")))].map((day) => ({
      day,
      units: byVariant(
        plan,
        days.filter((row) => count(row, "day") === day),
        "units",
      ),
    })),
    inIncidents: await inIncidents(plan, engine),
    firstKeptUs: layout.hasTime ? wholeOrNull(kept, "first_us") : null,
    lastKeptUs: layout.hasTime ? wholeOrNull(kept, "last_us") : null,
  };
}
const VALUES_KEPT = 200;

async function inIncidents(plan: Plan, engine: Engine): Promise<ByVariant[]> {
  if (plan.incidents.length === 0) return [];
  const rows = await engine.query(unitsInIncidents(plan.incidents.length));
  return plan.incidents.map((_, k) => byVariant(plan, rows, `units${k}`));
}

async function missingEvents(plan: Plan, commonest: readonly ValueCount[], engine: Engine): Promise<string[]> {
  const parts = plan.metrics.flatMap((metric) => [metric.of, ...(metric.per === null ? [] : [metric.per])]);
  const named = [plan.enrolment.event, ...parts.map((part) => part.event)].filter((event) => event !== null);
  const rare = [...new Set(named)].filter((event) => !commonest.some(({ value }) => value === event));
  if (rare.length === 0 || commonest.length < VALUES_KEPT) return rare;
  const found = (await engine.query(eventsThatOccur(valueList(rare)))).map((row) => text(row, "value"));
  return rare.filter((event) => !found.includes(event));
}

export async function rowsPerFile(files: number, engine: Engine): Promise<number[]> {
  const rows = await engine.query(rowsByFile());
  return Array.from({ length: files }, (_, file) =>
    sumOf(
      rows.filter((row) => Number(row.file) === file),
      "rows",
    ),
  );
}

/** Counts by the plan's variants; other names are in none. */
function byVariant(plan: Plan, rows: readonly Row[], column: string): ByVariant {
  return plan.variants.map((_, v) =>
    sumOf(
      rows.filter((row) => row.variant !== null && Number(row.variant) === v),
      column,
    ),
  );
}

const sumOf = (rows: readonly Row[], column: string) => rows.reduce((sum, row) => sum + count(row, column), 0);
