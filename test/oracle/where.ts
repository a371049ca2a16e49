import type { ColumnTest, Scalar, Where } from "../../src/plan/types.ts";
import { compareDecimals, type Decimal, readDecimal } from "./number.ts";

/** A cell: text, or null where it is missing. */
export type Cell = string | null;

/** All tests hold (DESIGN 4, rule 4). */
export function holds(where: Where, cell: (column: string) => Cell): boolean {
  return where.every((test) => testHolds(test, cell(test.column)));
}

/** Missing matches nothing but `{missing: true}`. */
export function testHolds(test: ColumnTest, cell: Cell): boolean {
  if (test.kind === "missing") return (cell === null) === test.value;
  if (cell === null) return false;
  switch (test.kind) {
    case "in":
      return test.values.some((value) => equals(cell, value));
    case "not":
      return !test.values.some((value) => equals(cell, value));
    case "matches":
      return test.patterns.some((pattern) => globMatches(pattern, cell));
    case "above":
      return compares(cell, test.value, (order) => order > 0);
    case "below":
      return compares(cell, test.value, (order) => order < 0);
    case "at-least":
      return compares(cell, test.value, (order) => order >= 0);
    case "at-most":
      return compares(cell, test.value, (order) => order <= 0);
  }
}

const YES = ["true", "t", "yes", "y", "1"];
const NO = ["false", "f", "no", "n", "0"];

function equals(cell: string, value: Scalar): boolean {
  switch (value.kind) {
    case "text":
      return cell === value.text;
    case "number":
      return compares(cell, value.value, (order) => order === 0);
    case "boolean":
      return (value.value ? YES : NO).includes(cell.toLowerCase());
  }
}

/** Numbers only: a text that is none compares with nothing. */
function compares(cell: string, threshold: string, wanted: (order: number) => boolean): boolean {
  const value = readDecimal(cell);
  return value !== null && wanted(compareDecimals(value, ofPlan(threshold)));
}

function ofPlan(text: string): Decimal {
  const value = readDecimal(text);
  if (value === null) throw new Error(`not a number of the plan: ${text}`);
  return value;
}

/** `*` is any run of characters, `?` one character, all else itself; over the whole value. */
export function globMatches(pattern: string, text: string): boolean {
  const [first, ...rest] = [...pattern];
  const characters = [...text];
  if (first === undefined) return characters.length === 0;
  if (first === "*") {
    return (
      characters.some((_, at) => globMatches(rest.join(""), characters.slice(at).join(""))) ||
      globMatches(rest.join(""), "")
    );
  }
  if (characters.length === 0 || (first !== "?" && first !== characters[0])) return false;
  return globMatches(rest.join(""), characters.slice(1).join(""));
}
