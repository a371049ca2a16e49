import {
  type DuckDBConnection,
  type DuckDBDataChunk,
  DuckDBDecimalValue,
  DuckDBInstance,
  type DuckDBValue,
} from "@duckdb/node-api";
import type { Columns, Engine, Row, Value } from "./engine.ts";
import type { Statement } from "./sql/sql.ts";
import { outOfMemory } from "./unusable.ts";

export interface DuckdbOptions {
  readonly threads?: number | undefined;
  /** As DuckDB writes sizes: "2GB". */
  readonly memory?: string | undefined;
  /** For what does not fit into memory. */
  readonly workFolder: string;
}

/** An engine in this process, without a database file. */
export async function openDuckdb(options: DuckdbOptions): Promise<Engine> {
  const within = <T>(work: Promise<T>): Promise<T> =>
    work.catch((cause: unknown) => {
      throw outOfMemory(cause, options.memory);
    });
  return within(opened(options, within));
}

async function opened(options: DuckdbOptions, within: <T>(work: Promise<T>) => Promise<T>): Promise<Engine> {
  const instance = await DuckDBInstance.create(":memory:", {
    temp_directory: options.workFolder,
    // Nothing that a run needs may come from outside.
    autoinstall_known_extensions: "false",
    autoload_known_extensions: "false",
    ...(options.threads === undefined ? {} : { threads: String(options.threads) }),
    ...(options.memory === undefined ? {} : { memory_limit: options.memory }),
  });
  const connection = await instance.connect();
  // Else a time with a zone is written as the machine's zone has it.
  await connection.run("SET TimeZone = 'UTC'");
  // Tables are sets of rows here: to keep them as the files have them costs a fifth of the reading, and memory.
  await connection.run("SET preserve_insertion_order = false");
  const version = await readVersion(connection);
  return {
    name: "duckdb",
    version,
    run: async (statement) => {
      await within(connection.run(statement.text));
    },
    query: (statement) => within(query(connection, statement)),
    columns: (statement) => within(columns(connection, statement)),
    queryInFileOrder: async (statement) => {
      await connection.run("SET preserve_insertion_order = true");
      try {
        return await within(query(connection, statement));
      } finally {
        await connection.run("SET preserve_insertion_order = false");
      }
    },
    interrupt: () => connection.interrupt(),
    close: () => {
      connection.closeSync();
      instance.closeSync();
    },
  };
}

async function query(connection: DuckDBConnection, statement: Statement): Promise<Row[]> {
  const reader = await connection.runAndReadAll(statement.text);
  const names = reader.columnNames();
  return reader.getRows().map((row) => Object.fromEntries(names.map((name, i) => [name, value(row[i] ?? null)])));
}

async function columns(connection: DuckDBConnection, statement: Statement): Promise<Columns> {
  const result = await connection.run(statement.text);
  const chunks = await result.fetchAllChunks();
  const names = result.columnNames();
  const read = <T>(column: string, parse: (value: DuckDBValue) => T) =>
    parsed(chunks, names.indexOf(column), parse, column);
  return {
    length: chunks.reduce((rows, chunk) => rows + chunk.rowCount, 0),
    wholes: (column) => read(column, (value) => (typeof value === "number" ? BigInt(value) : wholeOf(value))),
    counts: (column) => read(column, (value) => safe(typeof value === "number" ? value : Number(wholeOf(value)))),
    reals: (column) => read(column, finite),
    nanos: (column) => read(column, nanoOf),
  };
}

function parsed<T>(
  chunks: readonly DuckDBDataChunk[],
  column: number,
  parse: (value: DuckDBValue) => T,
  name: string,
): T[] {
  const found: T[] = [];
  try {
    for (const chunk of chunks) {
      const vector = chunk.getColumnVector(column);
      for (let row = 0; row < chunk.rowCount; row++) found.push(parse(vector.getItem(row)));
    }
  } catch (cause) {
    throw new Error(`column ${name}: ${cause instanceof Error ? cause.message : String(cause)}`, { cause });
  }
  return found;
}

function wholeOf(value: DuckDBValue): bigint {
  if (typeof value === "bigint") return value;
  throw new Error(`${String(value)}, expected a whole number`);
}

function safe(value: number): number {
  if (Number.isSafeInteger(value)) return value;
  throw new Error(`${value}, more than can be counted`);
}

function finite(value: DuckDBValue): number {
  if (typeof value === "number" && Number.isFinite(value)) return value;
  throw new Error(`${String(value)}, expected a finite number`);
}

function nanoOf(value: DuckDBValue): bigint {
  if (value instanceof DuckDBDecimalValue) return value.scale === 9 ? value.value : scaled(value);
  throw new Error(`${String(value)}, expected a decimal`);
}

const scaled = ({ value, scale }: DuckDBDecimalValue): bigint => value * 10n ** BigInt(9 - scale);

async function readVersion(connection: DuckDBConnection): Promise<string> {
  const reader = await connection.runAndReadAll("SELECT version() AS version");
  return String(reader.getRows()[0]?.[0]).replace(/^v/, "");
}

function value(found: DuckDBValue): Value {
  if (found === null) return null;
  switch (typeof found) {
    case "bigint":
    case "number":
    case "string":
    case "boolean":
      return found;
    default:
      if (found instanceof DuckDBDecimalValue) return { nano: scaled(found) };
      throw new Error(`no reading of ${String(found)}`);
  }
}
