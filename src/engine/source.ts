import type { LogFile } from "./files.ts";

/** How a column arrives from the reader. Text is VARCHAR with missing as NULL or ''. */
export type ColumnKind =
  | "text"
  | "whole"
  | "decimal"
  | "float"
  | "double"
  | "boolean"
  | "timestamp"
  | "nanoseconds"
  | "instant"
  | "date"
  | "other";

/** Files of one entry of `log` that one reader can take together: same format, same header, same types. */
export interface FileGroup {
  readonly source: number;
  readonly format: LogFile["format"];
  readonly files: readonly { readonly index: number; readonly path: string }[];
  /** As the files have them, in their order; for ndjson those that the plan names and a line has. */
  readonly columns: readonly string[];
  /** The engine's own names (Parquet: made unique where two differ in case only). */
  readonly engineNames: readonly string[];
  readonly kinds: readonly ColumnKind[];
  /** Blank lines before the header. */
  readonly skip: number;
}

/** The engine's type name to the way its values are read. */
export function kindOf(type: string): ColumnKind {
  if (type === "VARCHAR" || type.startsWith("ENUM")) return "text";
  if (/^U?(TINY|SMALL|BIG|HUGE)?INT(EGER)?$/.test(type)) return "whole";
  if (type.startsWith("DECIMAL")) return "decimal";
  if (type === "FLOAT") return "float";
  if (type === "DOUBLE") return "double";
  if (type === "BOOLEAN") return "boolean";
  if (type === "TIMESTAMP WITH TIME ZONE") return "instant";
  if (type === "TIMESTAMP_NS") return "nanoseconds";
  if (type.startsWith("TIMESTAMP")) return "timestamp";
  if (type === "DATE") return "date";
  return "other";
}
