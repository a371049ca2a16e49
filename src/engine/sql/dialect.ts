import type { DayRun, Step } from "../zone.ts";
import { type Comparison, comparedExactly, fitsDecimal, OPERATORS, withoutExponent } from "./exact.ts";
import { double, join, type Statement, sql } from "./sql.ts";

/**
 * What differs between engines. A stage holds no test of the engine's name; it asks the dialect.
 * Every text argument is VARCHAR with missing as NULL.
 */
export interface Dialect {
  /** Exact decimals: event values, and sums of them per unit. */
  readonly valueType: Statement;
  readonly sumType: Statement;
  /** The value of a number's text, to 9 places, half away from zero; NULL when it is none or out of range. */
  number(text: Statement): Statement;
  /** The same of a double, which stands for its shortest decimal; `ofText` is the number of that. */
  numberOfDouble(double: Statement, ofText: Statement): Statement;
  /** Whether text is a number by the grammar of DESIGN 4.1; range aside. */
  isNumber(text: Statement): Statement;
  /** Whether a number's text compares so with a plan's number, as exact decimals of any length; FALSE for all else. */
  compared(text: Statement, operator: Comparison, value: string): Statement;
  /** Microseconds on the clock that the text shows; NULL when unreadable. */
  clockUs(text: Statement): Statement;
  /** Microseconds of a timestamp, with zone or without; NULL when it is infinite or beyond the calendar. */
  epochUs(timestamp: Statement): Statement;
  /** Microseconds to subtract where the text states an offset, else NULL: the clock is the plan's. */
  statedOffsetUs(text: Statement): Statement;
  /** Levenshtein distance of two texts. */
  editDistance(a: Statement, b: Statement): Statement;
  /** 64-bit hash, for finding what may be equal; equality itself is tested on the text. */
  hash(...values: readonly Statement[]): Statement;
  /** 0..1023, the same on every engine: md5, and not the engine's own hash. */
  bucket(unit: Statement): Statement;
  /** Correctly rounded double of a decimal. */
  toDouble(decimal: Statement): Statement;
  /** floor(log2 |x|) of a decimal that is not 0. */
  powerClass(decimal: Statement): Statement;
  /** 4 k + j of the double nearest to a decimal that is not 0: 2^k (1 + j / 4) <= |x| < 2^k (1 + (j + 1) / 4), j in 0..3. */
  sizeClass(decimal: Statement): Statement;
  /** The value at the first (last) time among rows that hold one; ties go to the smallest value. */
  firstValue(value: Statement, atUs: Statement, condition: Statement): Statement;
  lastValue(value: Statement, atUs: Statement, condition: Statement): Statement;
}

const PLAIN_NUMBER = "[+-]?[0-9]+([.][0-9]+)?";
const NUMBER = `${PLAIN_NUMBER}(e[+-]?[0-9]+)?`;
const SHORT_NUMBER = "[+-]?[0-9]{1,9}([.][0-9]{1,9})?";
const DATE = "[0-9]{4}-[0-9]{2}-[0-9]{2}";
const OFFSET = "Z|[+-]([01][0-9]|2[0-3])(:?[0-5][0-9])?";
const TIME = `${DATE}([T ]([01][0-9]|2[0-3]):[0-5][0-9](:[0-5][0-9]([.][0-9]+)?)?(${OFFSET})?)?`;
const PLAIN_TIME = `${DATE}[T ]([01][0-9]|2[0-3]):[0-5][0-9]:[0-5][0-9]([.][0-9]+)?Z?`;
const EPOCH = "[+-]?[0-9]+";
// The end of the calendar that plans are read with, on either side of 1970.
const LAST_US = 8_640_000_000_000_000_000n;

// 2^53 nanos: up to here DuckDB divides two exact doubles, above it rounds twice, and the text is read instead.
const EXACT_BELOW = 9_007_199;

export const duckdb: Dialect = {
  valueType: sql`DECIMAL(27, 9)`,
  sumType: sql`DECIMAL(38, 9)`,
  // Short values fit 64 bits; one cast to 128 bits costs a hundred times as much.
  number: (text) => sql`CASE
    WHEN regexp_full_match(${text}, ${PLAIN_NUMBER})
    THEN coalesce(CAST(try_cast(${text} AS DECIMAL(18, 9)) AS DECIMAL(27, 9)), try_cast(${text} AS DECIMAL(27, 9)))
    WHEN regexp_full_match(${text}, ${NUMBER}) THEN try_cast(${withoutExponent(text, 18)} AS DECIMAL(27, 9)) END`,
  // A double and its shortest decimal are half a step apart at most, and the product is rounded by as little again: unless a
  // tie lies within that, both round to the same 10^-9. To write a double out and read it costs ten times as much.
  numberOfDouble: (x, ofText) => {
    const nano = sql`(${x} * ${double(1e9)})`;
    const fromTie = sql`abs(abs(${nano} - trunc(${nano})) - ${double(0.5)})`;
    return sql`CASE WHEN ${x} IS NULL THEN NULL
      WHEN abs(${x}) < ${double(1e6)} AND ${fromTie} > abs(${nano}) * ${double(2 ** -51)}
      THEN CAST(CAST(CAST(round(${nano}) AS BIGINT) AS DECIMAL(18, 0)) * CAST('0.000000001' AS DECIMAL(9, 9)) AS DECIMAL(27, 9))
      ELSE ${ofText} END`;
  },
  isNumber: (text) => sql`regexp_full_match(${text}, ${NUMBER})`,
  compared: (text, operator, value) => {
    const short = fitsDecimal(value)
      ? sql`WHEN regexp_full_match(${text}, ${SHORT_NUMBER})
          THEN CAST(try_cast(${text} AS DECIMAL(18, 9)) AS DECIMAL(38, 18)) ${OPERATORS[operator]} CAST(${value} AS DECIMAL(38, 18))`
      : sql``;
    return sql`coalesce(CASE ${short}
      WHEN regexp_full_match(${text}, ${NUMBER}) THEN ${comparedExactly(text, operator, value)} END, FALSE)`;
  },
  // Most logs write seconds and Z or nothing: those are cast as they stand, the rest without their offset.
  clockUs: (text) => sql`CASE
    WHEN regexp_full_match(${text}, ${PLAIN_TIME}) THEN epoch_us(try_cast(${text} AS TIMESTAMP))
    WHEN regexp_full_match(${text}, ${TIME}) THEN epoch_us(try_cast(regexp_replace(${text}, ${`([T ].*)(${OFFSET})$`}, '\\1') AS TIMESTAMP))
    WHEN regexp_full_match(${text}, ${EPOCH}) THEN ${bareEpoch(text, sql`length(ltrim(${text}, '+-'))`)}
    END`,
  epochUs: (timestamp) => sql`CASE WHEN isfinite(${timestamp}) THEN ${withinCalendar(sql`epoch_us(${timestamp})`)} END`,
  statedOffsetUs: (text) => sql`CASE
    WHEN ends_with(${text}, 'Z') THEN 0
    WHEN regexp_full_match(${text}, ${EPOCH}) THEN 0
    WHEN regexp_matches(${text}, ${`[T ].*[+-][0-9]{2}(:?[0-9]{2})?$`}) THEN ${offset(sql`regexp_extract(${text}, '[+-][0-9]{2}(:?[0-9]{2})?$')`)}
    END`,
  editDistance: (a, b) => sql`levenshtein(${a}, ${b})`,
  hash: (...values) => sql`hash(${join(values, ", ")})`,
  bucket: (unit) => sql`CAST(md5_number(${unit}) & 1023 AS SMALLINT)`,
  toDouble: (decimal) => sql`CASE WHEN abs(${decimal}) < ${EXACT_BELOW}
    THEN CAST(${decimal} AS DOUBLE) ELSE CAST(CAST(${decimal} AS VARCHAR) AS DOUBLE) END`,
  sizeClass: (decimal) => quarterOf(sql`abs(${duckdb.toDouble(decimal)})`),
  powerClass: (decimal) => sql`CAST(floor(log2(abs(CAST(${decimal} AS DOUBLE)))) AS INTEGER)`,
  firstValue: (value, atUs, condition) =>
    sql`arg_min(${value}, {'at': ${atUs}, 'value': ${value}}) FILTER (WHERE ${condition} AND ${value} IS NOT NULL)`,
  lastValue: (value, atUs, condition) =>
    sql`arg_max(${value}, {'at': ${atUs}, 'value': -${value}}) FILTER (WHERE ${condition} AND ${value} IS NOT NULL)`,
};

/** The logarithm may be one off beside a power of two: the quotient is exact, and -1 or 4 quarters are right there too. */
function quarterOf(size: Statement): Statement {
  const power = sql`floor(log2(${size}))`;
  return sql`CAST(4 * ${power} + floor((${size} / pow(2.0, ${power}) - 1) * 4) AS INTEGER)`;
}

function bareEpoch(text: Statement, digits: Statement): Statement {
  const us = sql`try_cast(${text} AS BIGINT) * CASE WHEN ${digits} <= 11 THEN 1000000 WHEN ${digits} <= 14 THEN 1000 ELSE 1 END`;
  return withinCalendar(us);
}

const withinCalendar = (us: Statement): Statement =>
  sql`CASE WHEN ${us} BETWEEN ${-LAST_US} AND ${LAST_US} THEN ${us} END`;

function offset(text: Statement): Statement {
  const digits = sql`replace(${text}, ':', '')`;
  const minutes = sql`CAST(substr(${digits}, 2, 2) AS BIGINT) * 60 + CASE WHEN length(${digits}) = 5 THEN CAST(substr(${digits}, 4, 2) AS BIGINT) ELSE 0 END`;
  return sql`CASE WHEN ${digits} LIKE '-%' THEN -1 ELSE 1 END * 60000000 * (${minutes})`;
}

/** A step function of an instant as nested cases, halved at each level: eight comparisons for two centuries of changes. */
function steps<T>(at: Statement, table: readonly Step<T>[], value: (step: Step<T>) => Statement): Statement {
  const first = table[0];
  if (first === undefined) throw new Error("a step table without a first step");
  if (table.length === 1) return value(first);
  const middle = table.length >> 1;
  const split = table[middle];
  if (split === undefined) throw new Error("a step table without a middle");
  const early = steps(at, table.slice(0, middle), value);
  return sql`CASE WHEN ${at} < ${split.from} THEN ${early} ELSE ${steps(at, table.slice(middle), value)} END`;
}

/** Microseconds to subtract from a local clock. */
export function localOffset(clockUs: Statement, table: readonly Step<bigint>[]): Statement {
  return steps(clockUs, table, (step) => sql`${step.value}`);
}

/** Local day (days since 1970-01-01) of an instant. */
export function localDay(atUs: Statement, table: readonly Step<DayRun>[]): Statement {
  return steps(atUs, table, ({ from, value }) =>
    value.days === 1
      ? sql`${value.first}`
      : sql`(${value.first} + least((${atUs} - ${from}) // 86400000000, ${value.days - 1}))`,
  );
}

/** A list of values, for IN. */
export const valueList = (values: readonly string[]): Statement =>
  join(
    values.map((value) => sql`${value}`),
    ", ",
  );

export { double };
