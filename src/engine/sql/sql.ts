/**
 * The only file that joins text to SQL. In the tag a hole is a Statement, or a value that is written as a quoted literal;
 * text from a plan or a log can never become SQL.
 *
 * Literals and not bound parameters: table functions, struct arguments and CREATE TABLE AS take no parameters on some
 * engines, and a statement that stands whole can be read and run by hand.
 */
export interface Statement {
  readonly text: string;
  readonly [MADE_HERE]: true;
}
// Only this file can make a statement: a row or a record that has a text is none.
const MADE_HERE: unique symbol = Symbol("made by sql.ts");
const statement = (text: string): Statement => ({ text, [MADE_HERE]: true });

export type Hole = Statement | string | bigint | number | boolean | null;

/** SQL from a template: statements as they are, values as literals. */
export function sql(parts: TemplateStringsArray, ...holes: readonly Hole[]): Statement {
  return statement(parts.reduce((text, part, i) => text + part + (i < holes.length ? literal(holes[i]) : ""), ""));
}

/** An identifier in double quotes. */
export function name(identifier: string): Statement {
  return statement(`"${identifier.replaceAll('"', '""')}"`);
}

/** Statements joined by a separator; an empty list is an empty statement. */
export function join(
  items: readonly Statement[],
  separator: " AND " | " OR " | " + " | ", " | "\n" | "\nUNION ALL\n",
): Statement {
  return statement(items.map(literal).join(separator));
}

/** A double that comes back as the same double: shortest round-trip digits, cast by the engine. */
export function double(value: number): Statement {
  if (!Number.isFinite(value)) throw new Error(`no literal for ${value}`);
  return sql`CAST(${String(value)} AS DOUBLE)`;
}

function literal(hole: Hole | undefined): string {
  if (hole === undefined) throw new Error("a hole without a value");
  if (hole === null) return "NULL";
  switch (typeof hole) {
    case "string":
      return text(hole);
    case "bigint":
      return wholeNumber(String(hole));
    case "boolean":
      return hole ? "TRUE" : "FALSE";
    case "number":
      if (!Number.isSafeInteger(hole)) throw new Error(`${hole} is no whole number: write it with double()`);
      return wholeNumber(String(hole));
    case "object":
      if (hole[MADE_HERE] !== true) throw new Error("an object that is no statement");
      return hole.text;
    default:
      throw new Error(`no literal for a ${typeof hole}`);
  }
}

/** In brackets where it has a sign: two of them in a row begin a comment. */
const wholeNumber = (digits: string): string => (digits.startsWith("-") ? `(${digits})` : digits);

/** Standard SQL has no escape but the doubled quote; a NUL would end the statement in C, so it is written by its code. */
function text(value: string): string {
  const quoted = value.split("\0").map((part) => `'${part.replaceAll("'", "''")}'`);
  return quoted.length === 1 ? (quoted[0] ?? "''") : `(${quoted.join(" || chr(0) || ")})`;
}
