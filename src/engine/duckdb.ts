import { type DuckDBConnection, DuckDBDecimalValue, DuckDBInstance, type DuckDBValue } from "@duckdb/node-api";
import type { Engine, Row, Value } from "./engine.ts";
import type { Statement } from "./sql/sql.ts";

export interface DuckdbOptions {
  readonly threads?: number | undefined;
  /** As DuckDB writes sizes: "2GB". */
  readonly memory?: string | undefined;
  /** For what does not fit into memory. */
  readonly workFolder: string;
}

/** An engine in this process, without a database file. */
export async function openDuckdb(options: DuckdbOptions): Promise<Engine> {
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
      await connection.run(statement.text);
    },
    query: (statement) => query(connection, statement),
    queryInFileOrder: async (statement) => {
      await connection.run("SET preserve_insertion_order = true");
      try {
        return await query(connection, statement);
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
      if (found instanceof DuckDBDecimalValue) return { nano: found.value * 10n ** BigInt(9 - found.scale) };
      throw new Error(`no reading of ${String(found)}`);
  }
}
