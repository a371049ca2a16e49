import { LONGEST_RECORD } from "../records.ts";
import type { ColumnKind, FileGroup } from "../source.ts";
import type { Dialect } from "./dialect.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/**
 * Readers: one SELECT a group of like files.
 * Writes  file (index into the inputs), readable, and c0.. for the wanted columns in their order, NULL where the group
 *         lacks one. A record that the reader cannot cut into cells does not come out here: it is in reject_errors.
 *         Numbered, of one file: also ordinal (csv, tsv: among the readable rows; ndjson: the line; Parquet: the row) and
 *         raw, the row's text where the reader has it.
 */

/** Delimiter of a reader that is to give whole lines: JSON text holds no control character. */
const NO_DELIMITER = "\u0001";
// Nested, since AND may look at the type of what is no JSON, which is an error.
const IS_OBJECT = sql`CASE WHEN json_valid(line) THEN json_type(line) = 'OBJECT' ELSE FALSE END`;
/** Ids of a filter, from a file of one quoted cell a line. */
export const listTable = (list: number, file: string): Statement => sql`
  CREATE TEMP TABLE ${name(`list_${list}`)} AS
  SELECT id
  FROM read_csv(${file}, auto_detect = false, header = false, columns = {id: 'VARCHAR'}, delim = ',', quote = '"',
    escape = '"', nullstr = ${NO_CELL}, hive_partitioning = false)`;

/**
 * How many of the records that the last reading could not cut have a quote that does not close where a cell ends, or go on
 * over so many lines that theirs will not.
 */
export const brokenQuotes = (): Statement => sql`
  SELECT count(*) AS records
  FROM reject_errors
  WHERE error_type = 'UNQUOTED VALUE'
    OR error_type = 'LINE SIZE OVER MAXIMUM' AND (contains(csv_line, chr(10)) OR contains(csv_line, chr(13)))`;

/**
 * How many lines of a file may end a record with surplus empty cells: they end with a delimiter, and hold as many as there
 * are columns, or a quote, which can hide that more came on the lines before.
 */
export const linesWithSurplus = (delimiter: string, width: number, path: string): Statement => sql`
  SELECT count(*) AS lines
  FROM ${lineReader([path], sql`ignore_errors = true`)}
  WHERE line LIKE ${`%${delimiter}`.repeat(width)} OR suffix(line, ${delimiter}) AND contains(line, '"')`;

const NO_CELL = "\u0001 no cell \u0001";
const JSON_BLANKS = " \t\r";
// Without it the reader takes sixteen times the longest line for each piece, more than a small memory limit holds.
const PIECE = 16 * 1024 * 1024;

export function read(group: FileGroup, wanted: readonly string[], isNumbered = false): Statement {
  switch (group.format) {
    case "csv":
      return readDelimited(group, wanted, ",", isNumbered);
    case "tsv":
      return readDelimited(group, wanted, "\t", isNumbered);
    case "ndjson":
      return readJson(group, wanted, isNumbered);
    case "parquet":
      return readParquet(group, wanted, isNumbered);
  }
}

/** How each wanted column arrives. */
export function kindsOf(group: FileGroup, wanted: readonly string[]): ColumnKind[] {
  return wanted.map((column) => group.kinds[group.columns.indexOf(column)] ?? "text");
}

/** Keys of the JSON objects in some files; the first `limit` lines, 0 for all. */
export function jsonKeys(paths: readonly string[], limit: number): Statement {
  const some = limit === 0 ? sql`` : sql`LIMIT ${limit}`;
  return sql`
    SELECT DISTINCT unnest(CASE WHEN ${IS_OBJECT} THEN json_keys(line) END) AS key
    FROM (SELECT line FROM ${lineReader(paths, sql`ignore_errors = true`)} ${some})`;
}

export const parquetColumns = (path: string): Statement => sql`DESCRIBE SELECT * FROM ${parquetReader(sql`${path}`)}`;

/** Top-level names as the file has them: the engine's own differ where two are alike but for case. */
export const parquetNodes = (path: string): Statement =>
  sql`SELECT name, num_children, precision FROM parquet_schema(${path})`;

// What folders are called ("arm=list/") says nothing about the rows in them.
const parquetReader = (files: Statement): Statement => sql`read_parquet(${files}, hive_partitioning = false)`;

function readDelimited(group: FileGroup, wanted: readonly string[], delimiter: string, isNumbered: boolean): Statement {
  // All columns as text, by position: no detection, and names that differ in case only stay apart.
  const columns = group.columns.map((_, i) => sql`${`c${i}`}: 'VARCHAR'`);
  const picked = wanted.map((column, i) => {
    const at = group.columns.indexOf(column);
    return at < 0 ? sql`CAST(NULL AS VARCHAR) AS ${name(`c${i}`)}` : sql`r.${name(`c${at}`)} AS ${name(`c${i}`)}`;
  });
  // Of one column the reader takes blank lines for rows, unless what stands for NULL is something that no cell holds.
  const none = group.columns.length === 1 ? NO_CELL : "";
  return sql`
    SELECT ${comma([fileIndex(group), sql`TRUE AS readable`, ...numbered(isNumbered, sql`row_number() OVER ()`), ...picked])}
    FROM read_csv(${paths(group)}, auto_detect = false, header = true, columns = {${join(columns, ", ")}},
      delim = ${delimiter}, quote = '"', escape = '"', nullstr = ${none}, allow_quoted_nulls = false,
      strict_mode = true, store_rejects = true, max_line_size = ${LONGEST_RECORD}, buffer_size = ${PIECE}, skip = ${group.skip},
      hive_partitioning = false) AS r`;
}

function readJson(group: FileGroup, wanted: readonly string[], isNumbered: boolean): Statement {
  const number = isNumbered ? [sql`ordinal`, sql`raw`] : [];
  const picked = wanted.map((column, i) => sql`${jsonText(column)} AS ${name(`c${i}`)}`);
  return sql`
    SELECT ${comma([sql`file`, sql`readable`, ...number, ...picked])}
    FROM (
      SELECT ${comma([sql`file`, sql`${IS_OBJECT} AS readable`, sql`CASE WHEN ${IS_OBJECT} THEN line END AS line`, ...number])}
      FROM (
        SELECT ${comma([fileIndex(group), sql`line`, ...(isNumbered ? [sql`row_number() OVER () AS ordinal`, sql`line AS raw`] : [])])}
        FROM ${lineReader(
          group.files.map((file) => file.path),
          sql`store_rejects = true`,
        )} AS r
      )
      WHERE trim(line, ${JSON_BLANKS}) <> ''
    )`;
}

/**
 * A value's text. Numbers with a fraction or exponent are cut from the line itself: the JSON reader passes them through
 * a double and gives 123456789.12345679 for 123456789.123456789. What is cut must be the same double, for a nested object
 * may hold the same key.
 */
function jsonText(column: string): Statement {
  const pattern = `${escapeRegExp(JSON.stringify(column))}[ \\t]*:[ \\t]*(-?[0-9]+([.][0-9]+)?([eE][+-]?[0-9]+)?)`;
  // A pointer of RFC 6901: every other path of the engine gives some characters a meaning.
  const at = `/${column.replaceAll("~", "~0").replaceAll("/", "~1")}`;
  const plain = sql`json_extract_string(line, ${at})`;
  const cut = sql`list_filter(regexp_extract_all(line, ${pattern}, 1), lambda digits: try_cast(digits AS DOUBLE) = try_cast(${plain} AS DOUBLE))[1]`;
  return sql`CASE WHEN json_type(line, ${at}) = 'DOUBLE' THEN coalesce(lower(${cut}), ${plain}) ELSE ${plain} END`;
}

function readParquet(group: FileGroup, wanted: readonly string[], isNumbered: boolean): Statement {
  const picked = wanted.map((column, i) => {
    const engineName = group.engineNames[group.columns.indexOf(column)];
    return engineName === undefined
      ? sql`CAST(NULL AS VARCHAR) AS ${name(`c${i}`)}`
      : sql`r.${name(engineName)} AS ${name(`c${i}`)}`;
  });
  return sql`
    SELECT ${comma([fileIndex(group), sql`TRUE AS readable`, ...numbered(isNumbered, sql`row_number() OVER ()`), ...picked])}
    FROM ${parquetReader(paths(group))} AS r`;
}

const numbered = (isNumbered: boolean, ordinal: Statement): Statement[] =>
  isNumbered ? [sql`${ordinal} AS ordinal`, sql`CAST(NULL AS VARCHAR) AS raw`] : [];

function lineReader(files: readonly string[], errors: Statement): Statement {
  return sql`read_csv([${join(
    files.map((file) => sql`${file}`),
    ", ",
  )}], auto_detect = false, header = false,
    columns = {line: 'VARCHAR'}, delim = ${NO_DELIMITER}, quote = '', escape = '', nullstr = '',
    strict_mode = false, max_line_size = ${LONGEST_RECORD}, buffer_size = ${PIECE},
    hive_partitioning = false, ${errors})`;
}

function fileIndex(group: FileGroup): Statement {
  const indexes = group.files.map((file) => sql`${file.index}`);
  const [only] = indexes;
  if (indexes.length === 1 && only !== undefined) return sql`CAST(${only} AS INTEGER) AS file`;
  return sql`CAST([${join(indexes, ", ")}][CAST(r.file_index AS BIGINT) + 1] AS INTEGER) AS file`;
}

const paths = (group: FileGroup) =>
  sql`[${join(
    group.files.map((file) => sql`${file.path}`),
    ", ",
  )}]`;
const comma = (items: readonly Statement[]) => join(items, ", ");
const escapeRegExp = (text: string) => text.replace(/[\\^$.*+?()[\]{}|]/g, "\\$&");

/** A column's text: what `where` compares, and what units and variants are called. Missing is NULL. */
export function asText(column: Statement, kind: ColumnKind): Statement {
  switch (kind) {
    case "text":
      return sql`nullif(${column}, '')`;
    case "float":
    case "double":
      // A floating-point column stands for its shortest decimal: 1 and not 1.0.
      return sql`regexp_replace(CAST(${column} AS VARCHAR), '[.]0$', '')`;
    default:
      return sql`nullif(CAST(${column} AS VARCHAR), '')`;
  }
}

/** NULL exactly where a column's text is, and cheaper. */
export const present = (column: Statement, kind: ColumnKind): Statement =>
  kind === "text" || kind === "other" ? asText(column, kind) : column;

/** A numeric column's exact value, NULL when it is missing, no number or out of range. */
export function asValue(column: Statement, kind: ColumnKind, dialect: Dialect): Statement {
  if (kind === "whole" || kind === "decimal") return sql`try_cast(${column} AS ${dialect.valueType})`;
  const number = dialect.number(asText(column, kind));
  return kind === "double" ? dialect.numberOfDouble(column, number) : number;
}

/** Clock time and stated offset, both in microseconds; an offset of NULL means the plan's zone. */
export function asTime(
  column: Statement,
  kind: ColumnKind,
  dialect: Dialect,
): { clockUs: Statement; offsetUs: Statement } {
  switch (kind) {
    case "instant":
      return { clockUs: dialect.epochUs(column), offsetUs: sql`CAST(0 AS BIGINT)` };
    case "nanoseconds": {
      // The cast cuts toward 1970, so before it a time would move to the next microsecond.
      const cut = sql`try_cast(${column} AS TIMESTAMP)`;
      const over = sql`CASE WHEN ${column} < ${cut} THEN 1 ELSE 0 END`;
      return { clockUs: sql`(${dialect.epochUs(cut)} - ${over})`, offsetUs: sql`CAST(NULL AS BIGINT)` };
    }
    case "timestamp":
    case "date":
      // Dates reach further than timestamps do.
      return { clockUs: dialect.epochUs(sql`try_cast(${column} AS TIMESTAMP)`), offsetUs: sql`CAST(NULL AS BIGINT)` };
    default: {
      const text = asText(column, kind);
      return { clockUs: dialect.clockUs(text), offsetUs: sql`CAST(${dialect.statedOffsetUs(text)} AS BIGINT)` };
    }
  }
}
