import { double, type Statement, sql } from "./sql.ts";

/**
 * Numbers of any length compared as exact decimals. A number that is not 0 is 0.d1d2d3... x 10^e with d1 not 0: of two
 * with one sign the greater e is the greater size, and with one e the digits decide, read as text (a shorter one that the
 * other starts with is the smaller).
 */

export type Comparison = "=" | ">" | "<" | ">=" | "<=";

interface Size {
  readonly sign: -1 | 0 | 1;
  readonly exponent: number;
  readonly digits: string;
}

/** A number's text in parts: its size is 0.stripped x 10^exponent; of a zero nothing is left of the digits. */
function partsOf(text: Statement): { stripped: Statement; exponent: Statement; isNegative: Statement } {
  const whole = sql`regexp_extract(${text}, '^[+-]?([0-9]+)', 1)`;
  const all = sql`(${whole} || regexp_extract(${text}, '[.]([0-9]+)', 1))`;
  const stripped = sql`ltrim(${all}, '0')`;
  // A double holds every exponent that a log can mean; beyond 2^53 it still orders them.
  const power = sql`coalesce(try_cast(nullif(regexp_extract(${text}, 'e([+-]?[0-9]+)$', 1), '') AS DOUBLE), 0)`;
  const exponent = sql`(length(${whole}) - length(${all}) + length(${stripped}) + ${power})`;
  return { stripped, exponent, isNegative: sql`starts_with(${text}, '-')` };
}

/**
 * The text of a number with an exponent as plain digits, for a cast to `whole` digits before the point and 9 after:
 * DuckDB's own cast of exponents drops digits and rounds twice ("689e-21" would be 0.000000001). NULL for a number of
 * more digits before the point; "0" for one under 10^-10, which rounds to it.
 */
export function withoutExponent(text: Statement, whole: number): Statement {
  const { stripped, exponent, isNegative } = partsOf(text);
  const point = sql`CAST(greatest(least(${exponent}, ${whole + 1}), -10) AS INTEGER)`;
  return sql`CASE WHEN ${stripped} = '' OR ${point} < -9 THEN '0' WHEN ${point} > ${whole} THEN NULL
    ELSE CASE WHEN ${isNegative} THEN '-' ELSE '' END
      || CASE WHEN ${point} <= 0 THEN '0.' || repeat('0', -${point}) || ${stripped}
        ELSE rpad(${stripped}, ${point}, '0') || '.' || substr(${stripped}, ${point} + 1) || '0' END END`;
}

/** Whether a number's text, missing as NULL, compares so with a plan's number; NULL or FALSE for what is no number. */
export function comparedExactly(text: Statement, operator: Comparison, value: string): Statement {
  const plan = sizeOf(value);
  const { stripped, exponent, isNegative } = partsOf(text);
  const sign = sql`CASE WHEN ${stripped} = '' THEN 0 WHEN ${isNegative} THEN -1 ELSE 1 END`;
  const digits = sql`rtrim(${stripped}, '0')`;
  const size = sql`CASE
    WHEN ${exponent} < ${double(plan.exponent)} THEN -1 WHEN ${exponent} > ${double(plan.exponent)} THEN 1
    WHEN ${digits} < ${plan.digits} THEN -1 WHEN ${digits} > ${plan.digits} THEN 1 ELSE 0 END`;
  const order = sql`CASE
    WHEN ${sign} < ${plan.sign} THEN -1 WHEN ${sign} > ${plan.sign} THEN 1
    WHEN ${plan.sign} = 0 THEN 0 ELSE ${plan.sign} * (${size}) END`;
  return sql`(${order}) ${OPERATORS[operator]} 0`;
}

/** Operators as SQL, of a closed list. */
export const OPERATORS: Readonly<Record<Comparison, Statement>> = {
  "=": sql`=`,
  ">": sql`>`,
  "<": sql`<`,
  ">=": sql`>=`,
  "<=": sql`<=`,
};

/** The plan's number: plain decimal digits, or, where those were too many, whole digits and an exponent. */
function sizeOf(value: string): Size {
  const match = /^([+-]?)(\d+)(?:\.(\d+))?(?:e([+-]?\d+))?$/.exec(value);
  if (match === null) throw new Error(`${value} is no decimal`);
  const [, sign = "", whole = "", places = "", power = "0"] = match;
  const all = whole + places;
  const stripped = all.replace(/^0+/, "");
  if (stripped === "") return { sign: 0, exponent: 0, digits: "" };
  return {
    sign: sign === "-" ? -1 : 1,
    exponent: whole.length - all.length + stripped.length + Number(power),
    digits: stripped.replace(/0+$/, ""),
  };
}

/** Whether a plan's number fits the decimals that short numbers are compared in: 20 digits before the point, 18 after. */
export function fitsDecimal(value: string): boolean {
  if (value.includes("e")) return false;
  const [whole = "", places = ""] = value.replace(/^[+-]/, "").split(".");
  return whole.replace(/^0+/, "").length <= 20 && places.replace(/0+$/, "").length <= 18;
}
