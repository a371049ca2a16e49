import type { ColumnTest, Part, Scalar, Where } from "../../plan/types.ts";
import type { Dialect } from "./dialect.ts";
import { join, type Statement, sql } from "./sql.ts";

/** Conditions of the plan on a row (DESIGN 4, rule 4). `column` gives a column's text, missing as NULL. */

type Columns = (column: string) => Statement;

/** All tests hold; never NULL. */
export function where(tests: Where, column: Columns, dialect: Dialect): Statement {
  if (tests.length === 0) return sql`TRUE`;
  return join(
    tests.map((test) => holds(test, column(test.column), dialect)),
    " AND ",
  );
}

/** A part's rows: its event, and its where. */
export function matches(
  part: Pick<Part, "event" | "where">,
  event: Statement,
  column: Columns,
  dialect: Dialect,
): Statement {
  const rest = where(part.where, column, dialect);
  return part.event === null ? sql`(${rest})` : sql`(coalesce(${event} = ${part.event}, FALSE) AND ${rest})`;
}

function holds(test: ColumnTest, text: Statement, dialect: Dialect): Statement {
  switch (test.kind) {
    case "missing":
      return test.value ? sql`(${text} IS NULL)` : sql`(${text} IS NOT NULL)`;
    case "in":
      return sql`coalesce(${isOneOf(text, test.values, dialect)}, FALSE)`;
    case "not":
      return sql`(${text} IS NOT NULL AND NOT coalesce(${isOneOf(text, test.values, dialect)}, FALSE))`;
    case "above":
      return dialect.compared(text, ">", test.value);
    case "below":
      return dialect.compared(text, "<", test.value);
    case "at-least":
      return dialect.compared(text, ">=", test.value);
    case "at-most":
      return dialect.compared(text, "<=", test.value);
    case "matches": {
      const patterns = test.patterns.map((pattern) => sql`${text} LIKE ${like(pattern)} ESCAPE '\\'`);
      return sql`coalesce(${join(patterns, " OR ")}, FALSE)`;
    }
  }
}

function isOneOf(text: Statement, values: readonly Scalar[], dialect: Dialect): Statement {
  if (values.length === 0) return sql`FALSE`;
  return sql`(${join(
    values.map((value) => equals(text, value, dialect)),
    " OR ",
  )})`;
}

/** Each of them is FALSE or NULL for what it does not match. */
function equals(text: Statement, value: Scalar, dialect: Dialect): Statement {
  switch (value.kind) {
    case "text":
      return sql`${text} = ${value.text}`;
    case "boolean":
      return value.value
        ? sql`lower(${text}) IN ('true', 't', 'yes', 'y', '1')`
        : sql`lower(${text}) IN ('false', 'f', 'no', 'n', '0')`;
    case "number":
      return dialect.compared(text, "=", value.value);
  }
}

/** `*` any run of characters, `?` one: the plan's pattern as LIKE has it. */
function like(pattern: string): string {
  return pattern
    .replace(/[\\%_]/g, "\\$&")
    .replaceAll("*", "%")
    .replaceAll("?", "_");
}
