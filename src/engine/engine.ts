import type { Statement } from "./sql/sql.ts";

/** A value as an engine gives it back: whole numbers as bigint, decimals in 10^-9 as { nano }, text, doubles, booleans. */
export type Value = bigint | number | string | boolean | null | { readonly nano: bigint };
export type Row = Readonly<Record<string, Value>>;

/** What the stages need of an engine. */
export interface Engine {
  readonly name: string;
  readonly version: string;
  run(statement: Statement): Promise<void>;
  query(statement: Statement): Promise<Row[]>;
  /** The same rows by column, where they are many: an object a row would cost more than the statement. */
  columns(statement: Statement): Promise<Columns>;
  /** As query, of a statement that numbers records as their file has them; while it runs, no other may. */
  queryInFileOrder(statement: Statement): Promise<Row[]>;
  /** Stops the statement that runs; it fails with an error. */
  interrupt(): void;
  close(): void;
}

/** What a statement gives, column by column, each as the type that its statement promises; none holds NULL. */
export interface Columns {
  readonly length: number;
  wholes(column: string): bigint[];
  /** Whole numbers that a double holds. */
  counts(column: string): number[];
  reals(column: string): number[];
  /** Exact decimals, in 10^-9. */
  nanos(column: string): bigint[];
}

/** Parsing at the border: a column of a row as the type that its statement promises. */
export function whole(row: Row, column: string): bigint {
  const value = row[column];
  if (typeof value === "bigint") return value;
  if (typeof value === "number" && Number.isSafeInteger(value)) return BigInt(value);
  throw new Error(`column ${column} holds ${String(value)}, expected a whole number`);
}
export const wholeOrNull = (row: Row, column: string): bigint | null =>
  row[column] == null ? null : whole(row, column);

export function count(row: Row, column: string): number {
  const value = Number(whole(row, column));
  if (!Number.isSafeInteger(value)) throw new Error(`column ${column} holds ${value}, more than can be counted`);
  return value;
}

export function text(row: Row, column: string): string {
  const value = row[column];
  if (typeof value === "string") return value;
  throw new Error(`column ${column} holds ${String(value)}, expected text`);
}
export const textOrNull = (row: Row, column: string): string | null => (row[column] == null ? null : text(row, column));

export function real(row: Row, column: string): number {
  const value = row[column];
  if (typeof value === "number" && Number.isFinite(value)) return value;
  throw new Error(`column ${column} holds ${String(value)}, expected a finite number`);
}

/** An exact decimal, in 10^-9. */
export function nano(row: Row, column: string): bigint {
  const value = row[column];
  if (typeof value === "object" && value !== null) return value.nano;
  throw new Error(`column ${column} holds ${String(value)}, expected a decimal`);
}
