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

/** Whether a number's text, missing as NULL, compares so with a plan's number; NULL or FALSE for what is no number. */
export function comparedExactly(text: Statement, operator: Comparison, value: string): Statement {
  const plan = sizeOf(value);
  const whole = sql`regexp_extract(${text}, '^[+-]?([0-9]+)', 1)`;
  const all = sql`(${whole} || regexp_extract(${text}, '[.]([0-9]+)', 1))`;
  const stripped = sql`ltrim(${all}, '0')`;
  const isZero = sql`${stripped} = ''`;
  const isNegative = sql`starts_with(${text}, '-')`;
  const sign = sql`CASE WHEN ${isZero} THEN 0 WHEN ${isNegative} THEN -1 ELSE 1 END`;
  // A double holds every exponent that a log can mean; beyond 2^53 it still orders them.
  const power = sql`coalesce(try_cast(nullif(regexp_extract(${text}, 'e([+-]?[0-9]+)$', 1), '') AS DOUBLE), 0)`;
  const exponent = sql`(length(${whole}) - length(${all}) + length(${stripped}) + ${power})`;
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

/** The plan's number, plain decimal digits. */
function sizeOf(value: string): Size {
  const match = /^([+-]?)(\d+)(?:\.(\d+))?$/.exec(value);
  if (match === null) throw new Error(`${value} is no plain decimal`);
  const [, sign = "", whole = "", places = ""] = match;
  const all = whole + places;
  const stripped = all.replace(/^0+/, "");
  if (stripped === "") return { sign: 0, exponent: 0, digits: "" };
  return {
    sign: sign === "-" ? -1 : 1,
    exponent: whole.length - all.length + stripped.length,
    digits: stripped.replace(/0+$/, ""),
  };
}

/** Whether a plan's number fits the decimals that short numbers are compared in: 20 digits before the point, 18 after. */
export function fitsDecimal(value: string): boolean {
  const [whole = "", places = ""] = value.replace(/^[+-]/, "").split(".");
  return whole.replace(/^0+/, "").length <= 20 && places.replace(/0+$/, "").length <= 18;
}
