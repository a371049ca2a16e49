import type { Plan } from "../../plan/types.ts";
import { FATE, type Layout } from "../layout.ts";
import type { FileGroup } from "../source.ts";
import type { Step } from "../zone.ts";
import { type Dialect, localOffset } from "./dialect.ts";
import { asText, asTime, asValue, kindsOf, present, read } from "./read.ts";
import { join, name, type Statement, sql } from "./sql.ts";
import { matches, where } from "./where.ts";

/** Why a row is rejected, first that applies; REASON.notNumber + c and REASON.outOfRange + c name a column. */
export const REASON = {
  none: 0,
  /** The reader could not cut the record into the header's cells, or it is no UTF-8. */
  unreadable: 1,
  notText: 2,
  notObject: 3,
  noUnit: 4,
  noTime: 5,
  tooLong: 6,
  notNumber: 1000,
  outOfRange: 2000,
} as const;

/**
 * Stage 1, once a group of like files: one row a record of the log, typed, tested and with its first fate.
 * Reads   the files
 * Writes  rows: file, source, unit, at_us, event, event_id, variant (index in the plan, the number of variants for a name
 *         the plan lacks, NULL for none), other_variant (that name), x<c>/v<c> columns, m<i> metric conditions, w<i> unit
 *         filter conditions, enrols, reason, fate (FATE; a row filter's is firstFilter + its index), text (of a rejected row)
 * A record that cannot be cut into cells is added by stage 2.
 */
export function rows(
  plan: Plan,
  layout: Layout,
  group: FileGroup,
  into: "create" | "insert",
  zone: readonly Step<bigint>[],
  dialect: Dialect,
): Statement {
  const x = (column: string) => name(`x${layout.columns.indexOf(column)}`);
  const isKept = sql`reason = ${REASON.none}`;
  const filters = layout.rowFilters.map(
    (filter, i) => sql`WHEN ${where(filter.where, x, dialect)} THEN ${FATE.firstFilter + i}`,
  );
  const conditions = [
    ...layout.matches.map((match, i) => sql`${matches(match, sql`event`, x, dialect)} AS ${name(`m${i}`)}`),
    ...layout.flags.map((tests, i) => sql`(${where(tests, x, dialect)}) AS ${name(`w${i}`)}`),
  ];
  const enrolmentEvent =
    plan.enrolment.event === null ? sql`TRUE` : sql`coalesce(event = ${plan.enrolment.event}, FALSE)`;
  const judged = judgedRows(plan, layout, group, zone, dialect, false);
  return sql`
    ${into === "create" ? sql`CREATE TEMP TABLE rows AS` : sql`INSERT INTO rows`}
    SELECT file, source, unit, at_us, event, event_id, ${variantCode(plan)} AS variant,
      CASE WHEN ${variantCode(plan)} = ${plan.variants.length} THEN variant END AS other_variant,
      ${list([...storedColumns(layout), ...conditions])},
      variant IS NOT NULL AND ${enrolmentEvent} AS enrols,
      CAST(reason AS SMALLINT) AS reason,
      CAST(CASE WHEN NOT ${isKept} THEN ${FATE.rejected} ${join(filters, "\n")} ELSE ${FATE.seen} END AS SMALLINT) AS fate,
      CASE WHEN NOT ${isKept} THEN ${judged.text} END AS text
    FROM (${judged.rows})`;
}

/**
 * The rejected rows of one file, found by a second reading, for rejects.csv.
 * Gives   ordinal, reason, text, in the order of the file
 */
export function rejectedOrdinals(
  plan: Plan,
  layout: Layout,
  group: FileGroup,
  zone: readonly Step<bigint>[],
  dialect: Dialect,
): Statement {
  const judged = judgedRows(plan, layout, group, zone, dialect, true);
  return sql`
    SELECT ordinal, reason, coalesce(raw, ${judged.text}) AS text
    FROM (${judged.rows})
    WHERE reason <> ${REASON.none}
    ORDER BY ordinal`;
}

/** Typed rows with at_us and the reason of their rejection, and what rejects.csv shows of one, over a row of them. */
function judgedRows(
  plan: Plan,
  layout: Layout,
  group: FileGroup,
  zone: readonly Step<bigint>[],
  dialect: Dialect,
  isNumbered: boolean,
): { readonly rows: Statement; readonly text: Statement } {
  const typed = typedRows(plan, layout, group, dialect, isNumbered);
  const rows = sql`
    SELECT *, ${reason(layout, typed, dialect)} AS reason
    FROM (
      SELECT * EXCLUDE (clock_us, offset_us), clock_us - coalesce(offset_us, ${localOffset(sql`clock_us`, zone)}) AS at_us
      FROM (${typed.rows})
    )`;
  // Of a row that was cut into cells those that the plan names are shown.
  const shown = [typed.timeText, sql`event`, sql`variant`, ...layout.columns.map((_, c) => typed.text(c))];
  return { rows, text: sql`concat_ws(', ', ${list(shown)})` };
}

/** Rows with their columns by role and by place, and what can be said of a column over one of them. */
interface TypedRows {
  readonly rows: Statement;
  readonly timeText: Statement;
  readonly text: (c: number) => Statement;
  readonly isThere: (c: number) => Statement;
}

/** The columns that later stages order rows by, as they are stored: numbers by value, all else as text. */
export function storedColumns(layout: Layout): Statement[] {
  const own = layout.columns
    .slice(0, layout.kept)
    .map((_, c) => (layout.standIns[c] == null ? stored(layout, c) : null));
  return own.filter((column) => column !== null);
}

/** A column over a row of `rows`: stored, or what it stands for. */
export function stored(layout: Layout, c: number): Statement {
  const standIn = layout.standIns[c];
  if (standIn != null) {
    const sources = join(
      standIn.sources.map((source) => sql`${source}`),
      ", ",
    );
    return sql`CASE WHEN source IN (${sources}) THEN ${name(standIn.role)} END`;
  }
  return layout.numeric[c] === true ? name(`v${c}`) : name(`x${c}`);
}

/**
 * A column's text is x<c> where it is stored or some condition is asked of it. Any other is left as the reader has it, for
 * only of rejected rows it is shown: to write out every time and number of a typed column costs more than to read them.
 */
function typedRows(plan: Plan, layout: Layout, group: FileGroup, dialect: Dialect, isNumbered: boolean): TypedRows {
  const roles = plan.log[group.source]?.columns;
  if (roles === undefined) throw new Error(`no entry ${group.source} of the log`);
  const wanted = [
    ...new Set([roles.unit, roles.time, roles.event, roles.variant, roles.eventId, ...layout.columns]),
  ].filter((column) => column !== null);
  const kinds = kindsOf(group, wanted);
  const at = (column: string) => wanted.indexOf(column);
  const raw = (column: string) => name(`c${at(column)}`);
  const kind = (column: string) => kinds[at(column)] ?? "text";
  const text = (column: string | null) =>
    column === null ? sql`CAST(NULL AS VARCHAR)` : asText(raw(column), kind(column));
  const time =
    roles.time === null
      ? { clockUs: sql`CAST(NULL AS BIGINT)`, offsetUs: sql`CAST(NULL AS BIGINT)` }
      : asTime(raw(roles.time), kind(roles.time), dialect);
  const asked = columnsAsked(layout);
  const columns = layout.columns.flatMap((column, c) => [
    ...(asked.has(c) ? [sql`${text(column)} AS ${name(`x${c}`)}`] : []),
    ...(layout.numeric[c] === true ? [sql`${asValue(raw(column), kind(column), dialect)} AS ${name(`v${c}`)}`] : []),
  ]);
  const column = (c: number) => layout.columns[c] ?? "";
  return {
    rows: sql`
    SELECT file, CAST(${group.source} AS SMALLINT) AS source, readable, ${text(roles.unit)} AS unit,
      ${time.clockUs} AS clock_us, ${time.offsetUs} AS offset_us,
      ${text(roles.event)} AS event, ${text(roles.eventId)} AS event_id,
      ${list([sql`${text(roles.variant)} AS variant`, ...(isNumbered ? [sql`ordinal`, sql`raw`] : []), ...columns, ...wanted.map(raw)])}
    FROM (${read(group, wanted, isNumbered)})`,
    timeText: text(roles.time),
    text: (c) => (asked.has(c) ? name(`x${c}`) : text(column(c))),
    isThere: (c) => sql`${asked.has(c) ? name(`x${c}`) : present(raw(column(c)), kind(column(c)))} IS NOT NULL`,
  };
}

/** The columns whose text each row is asked for: those that are stored as text, and those that some condition looks at. */
function columnsAsked(layout: Layout): ReadonlySet<number> {
  const conditions = [
    ...layout.matches.map((match) => match.where),
    ...layout.rowFilters.map((filter) => filter.where),
    ...layout.flags,
  ];
  const tested = conditions.flatMap((tests) => tests.map((test) => layout.columns.indexOf(test.column)));
  const kept = layout.columns.slice(0, layout.kept).flatMap((_, c) => (isStoredAsText(layout, c) ? [c] : []));
  return new Set([...tested, ...kept]);
}

const isStoredAsText = (layout: Layout, c: number): boolean => layout.standIns[c] == null && layout.numeric[c] !== true;

function reason(layout: Layout, typed: TypedRows, dialect: Dialect): Statement {
  const values = layout.columns.flatMap((_, c) => {
    if (layout.numeric[c] !== true) return [];
    return [
      sql`WHEN ${name(`v${c}`)} IS NULL AND ${typed.isThere(c)}
        THEN CASE WHEN ${dialect.isNumber(typed.text(c))} THEN ${REASON.outOfRange + c} ELSE ${REASON.notNumber + c} END`,
    ];
  });
  const noTime = layout.hasTime ? sql`WHEN at_us IS NULL THEN ${REASON.noTime}` : sql``;
  return sql`CASE WHEN NOT readable THEN ${REASON.notObject} WHEN unit IS NULL THEN ${REASON.noUnit} ${noTime}
    ${join(values, "\n")} ELSE ${REASON.none} END`;
}

function variantCode(plan: Plan): Statement {
  const cases = plan.variants.map((variant, i) => sql`WHEN ${variant.name} THEN ${i}`);
  return sql`CAST(CASE WHEN variant IS NULL THEN NULL ELSE CASE variant ${join(cases, "\n")} ELSE ${plan.variants.length} END END AS SMALLINT)`;
}

const list = (items: readonly Statement[]) => join(items, ", ");

/**
 * Stage 2, after each group: records that the reader could not cut into cells join the rows, as rejected. One bad record may be reported
 * several times, so each place counts once.
 * Reads   reject_errors, reject_scans (the reader's)
 * Writes  rows
 */
export function unreadableRows(group: FileGroup): Statement {
  const files = group.files.map(({ path, index }) => sql`(${path}, ${index})`);
  return sql`
    INSERT INTO rows (file, source, reason, fate, text)
    SELECT f.file, ${group.source}, e.reason, ${FATE.rejected}, e.text
    FROM (
      SELECT scan_id, file_id, line, line_byte_position, min(csv_line) AS text,
        CASE WHEN bool_or(error_type = 'INVALID ENCODING') THEN ${REASON.notText}
          WHEN bool_or(error_type = 'LINE SIZE OVER MAXIMUM') THEN ${REASON.tooLong} ELSE ${REASON.unreadable} END AS reason
      FROM reject_errors
      GROUP BY scan_id, file_id, line, line_byte_position
    ) AS e
    JOIN reject_scans AS s ON s.scan_id = e.scan_id AND s.file_id = e.file_id
    JOIN (VALUES ${list(files)}) AS f(path, file) ON f.path = s.file_path`;
}

/** Takes a group's rows out again, for it is read anew. */
export const forgetRows = (group: FileGroup): Statement =>
  sql`DELETE FROM rows WHERE file IN (${list(group.files.map(({ index }) => sql`${index}`))})`;
