import type { Dialect } from "./dialect.ts";
import { double, join, name, type Statement, sql } from "./sql.ts";

/**
 * Stages 10 and 11: exact power sums per variant and bucket (DESIGN 5). u = (x - pivot) / scale, t_k = u^k 2^60,
 * high = floor(t), low = floor((t - high) 2^60 + 0.5): 64-bit terms, 128-bit sums, so no order, thread or engine changes one.
 */

/** One value per unit: how it is written, and what it is measured against. */
export interface Measured {
  /** u, a double in [-1, 1] or NULL, over a row of `units`. */
  readonly u: Statement;
  /** x itself, for smallest and largest; and whether an exact sum of it is wanted. */
  readonly x: Statement;
  readonly isDecimal: boolean;
}

const TWO_60 = double(2 ** 60);
const ORDERS = [1, 2, 3, 4] as const;

/** u of a decimal value: the correctly rounded double of the exact difference, over a power of two. */
export function decimalValue(x: Statement, pivot: string, scale: number, dialect: Dialect): Measured {
  const difference = sql`(${x} - CAST(${pivot} AS ${dialect.sumType}))`;
  return { u: sql`(${dialect.toDouble(difference)}) / ${double(scale)}`, x, isDecimal: true };
}

export const doubleValue = (x: Statement, scale: number): Measured => ({
  u: sql`${x} / ${double(scale)}`,
  x,
  isDecimal: false,
});

/** A value and the rows and groups over which it is summed. */
export interface Summed {
  readonly value: Measured;
  readonly over: Over;
}

/**
 * One row a value and group, all values one under the other: a column for each of a dozen sums of a dozen values would be a
 * state of a hundred and more in every group, of which the next one is never at hand.
 * Reads   what each is summed over, by default candidates
 * Gives   part (place of the value), variant, grouping, bucket, n, h1..4, l1..4, total (of decimals), least, most; of a group
 *         in which no unit has a value no row
 * @param summed as many groupings for each, and either all decimals or none
 */
export function cells(summed: readonly Summed[]): Statement {
  const isDecimal = summed.some(({ value }) => value.isDecimal);
  // Three nested levels, so that each of u, its powers and their whole parts is computed once a unit.
  const parts = summed.map(({ value, over }) => ({
    over,
    columns: [sql`${value.u} AS u`, sql`${value.x} AS x`],
    has: sql`${value.x} IS NOT NULL`,
  }));
  const u = sql`u`;
  const powers = ORDERS.map((k) => product(Array.from({ length: k }, () => u)));
  const terms = [sql`x`, ...ORDERS.map((k) => sql`${powers[k - 1] ?? u} * ${TWO_60} AS ${name(`t${k}`)}`)];
  const sums = [
    sql`count(x) AS n`,
    ...ORDERS.flatMap((k) => twoIntegers(name(`t${k}`), String(k))),
    ...(isDecimal ? [sql`sum(x) AS total`] : []),
    sql`min(x) AS least, max(x) AS most`,
  ];
  return grouped(parts, terms, sums);
}

/** Which rows of which table, by default of the candidates, and in which groups. */
export interface Over {
  readonly bucket: Statement;
  /** Other groupings in the same pass over the units; whole numbers that are never NULL, as the bucket. */
  readonly others?: readonly Statement[];
  readonly units: Statement;
  readonly from?: Statement;
}
export const EACH_BUCKET: Over = { bucket: sql`bucket`, units: sql`analysed` };
/** Arm by arm, the units whose value is not 0. */
export const unlessZero = (x: Statement): Over => ({ bucket: sql`0`, units: sql`(analysed AND ${x} <> 0)` });

/**
 * How a candidate stands to the choices of units: bits 1 analysed, 2 the other way, 4 any follow-up, 8 on the first day, and
 * from 16 on one an incident, enrolled in it.
 */
function standing(incidents: number): Statement {
  const bits = ["analysed", "other_way", "any_follow_up", "first_day", ...inIncidents(incidents)];
  const terms = bits.map((column, k) => sql`CASE WHEN ${name(column)} THEN ${2 ** k} ELSE 0 END`);
  return join(terms, " + ");
}

const inIncidents = (incidents: number) => Array.from({ length: incidents }, (_, k) => `i${k}`);

/** Apart by standing, those that not every choice of units counts. */
export function otherwise(incidents: number): Over {
  const alike = sql`analysed AND other_way AND any_follow_up`;
  const apart = ["first_day", ...inIncidents(incidents)].map((column) => name(column));
  return { bucket: standing(incidents), units: sql`(NOT (${alike}) OR ${join(apart, " OR ")})` };
}
export const NOT_ANALYSED = sql`(SELECT * FROM candidates WHERE NOT analysed)`;

/** Gives variant, standing, units. */
export const standingCounts = (incidents: number): Statement => sql`
  SELECT variant, ${standing(incidents)} AS standing, count(*) AS units FROM candidates GROUP BY 1, 2`;

/** Units above the first of some caps in ascending order, apart by how many of the caps they lie above. */
export function aboveCaps(x: Statement, caps: readonly string[], dialect: Dialect): Over {
  const above = (cap: string) => sql`${x} > CAST(${cap} AS ${dialect.sumType})`;
  const [lowest] = caps;
  if (lowest === undefined) throw new Error("no cap to lie above");
  const cases = caps.map((cap, i) => sql`WHEN ${above(cap)} THEN ${i + 1}`).reverse();
  return { bucket: sql`CASE ${join(cases, "\n")} END`, units: sql`(analysed AND ${above(lowest)})` };
}

/** Two values over the same units; a unit without y has no x. Partial: some units have y alone. */
export interface Pair {
  readonly y: Measured;
  readonly x: Measured;
  readonly isPartial: boolean;
}

/** A pair and the rows and groups over which it is summed. */
export interface SummedPair {
  readonly pair: Pair;
  readonly over: Over;
}

/**
 * What the cells of two values lack for their joint sums: the sum of products, and of a partial pair the sums of y over
 * the units that have x.
 * Gives   part (place of the pair), variant, grouping, bucket, n, h11, l11; of a partial one h10, l10, h20, l20, y, which are 0
 *         for others
 */
export function jointCells(summed: readonly SummedPair[], dialect: Dialect): Statement {
  const parts = summed.map(({ pair: { y, x, isPartial }, over }) => ({
    over,
    columns: [
      sql`${y.u} AS u, ${x.u} AS w`,
      isPartial
        ? sql`${y.u} AS own, ${y.x} AS y`
        : sql`CAST(NULL AS DOUBLE) AS own, CAST(NULL AS ${dialect.sumType}) AS y`,
    ],
    has: sql`${y.x} IS NOT NULL AND ${x.x} IS NOT NULL`,
  }));
  const terms = [sql`y, u * w * ${TWO_60} AS t11, own * ${TWO_60} AS t10, own * own * ${TWO_60} AS t20`];
  const sums = [
    sql`count(*) AS n`,
    ...["11", "10", "20"].flatMap((jk) => twoIntegers(name(`t${jk}`), jk)),
    sql`coalesce(sum(y), 0) AS y`,
  ];
  return grouped(parts, terms, sums);
}

/** Some columns over a row, the rows that have them, and over which they are summed. */
interface Part {
  readonly over: Over;
  readonly columns: readonly Statement[];
  readonly has: Statement;
}

/** Sums by part, variant and bucket, and for every other grouping by its group, which stands as bucket too. */
function grouped(parts: readonly Part[], terms: readonly Statement[], sums: readonly Statement[]): Statement {
  const columns = [sql`bucket`, ...(parts[0]?.over.others ?? [])].map((_, g) => name(`g${g}`));
  const rows = parts.map(({ over: { bucket, others = [], units, from = sql`candidates` }, columns, has }, part) => {
    const groups = [bucket, ...others].map((group, g) => sql`${group} AS ${name(`g${g}`)}`);
    return sql`
      SELECT ${list([sql`${part} AS part`, sql`variant`, ...groups, ...columns])}
      FROM ${from} WHERE ${units} AND ${has}`;
  });
  return sql`
    SELECT ${list([sql`part, variant`, ...placeOf(columns), ...sums])}
    FROM (
      SELECT ${list([sql`part, variant`, ...columns, ...terms])}
      FROM (${join(rows, "\nUNION ALL\n")})
    )
    GROUP BY GROUPING SETS (${list(columns.map((column) => sql`(part, variant, ${column})`))})
    ORDER BY part, grouping, variant, bucket`;
}

/** Which grouping a row of sums belongs to, and its group there. */
function placeOf(columns: readonly Statement[]): Statement[] {
  const when = (value: (column: Statement, g: number) => Statement) =>
    join(
      columns.map((column, g) => sql`WHEN GROUPING(${column}) = 0 THEN ${value(column, g)}`),
      "\n",
    );
  return [sql`CASE ${when((_, g) => sql`${g}`)} END AS grouping`, sql`CASE ${when((column) => column)} END AS bucket`];
}

/** Sums of the whole part and of the rest of t, as 64-bit terms. */
function twoIntegers(t: Statement, suffix: string): Statement[] {
  return [
    sql`coalesce(sum(CAST(floor(${t}) AS BIGINT)), 0) AS ${name(`h${suffix}`)}`,
    sql`coalesce(sum(CAST(floor((${t} - floor(${t})) * ${TWO_60} + 0.5) AS BIGINT)), 0) AS ${name(`l${suffix}`)}`,
  ];
}

/** Powers by repeated multiplication, left to right: ((u u) u) u. */
function product(factors: readonly Statement[]): Statement {
  const [first, ...rest] = factors;
  if (first === undefined) throw new Error("a power without a factor");
  return rest.reduce((product, factor) => sql`(${product} * ${factor})`, first);
}

/**
 * What a pivot and a scale are worked out from: count, exact sum, smallest and largest per power-of-two class of |x|.
 * Gives   part, class (NULL for 0), n, total, least, most
 */
export function classes(values: readonly Statement[], from: Statement, dialect: Dialect): Statement {
  const parts = values.map((x, part) => sql`SELECT ${part} AS part, ${x} AS x FROM ${from} WHERE ${x} IS NOT NULL`);
  return sql`
    SELECT part, class, count(*) AS n, sum(x) AS total, min(x) AS least, max(x) AS most
    FROM (
      SELECT part, CASE WHEN x <> 0 THEN ${dialect.powerClass(sql`x`)} END AS class, x
      FROM (${join(parts, "\nUNION ALL\n")})
    )
    GROUP BY part, class`;
}

/** Exact totals per arm: n, sum of a value. Gives variant, and per value i: n<i>, total<i>. */
export function totals(values: readonly Statement[]): Statement {
  const sums = values.flatMap((x, i) => [sql`count(${x}) AS ${name(`n${i}`)}`, sql`sum(${x}) AS ${name(`total${i}`)}`]);
  return sql`SELECT ${list([sql`variant`, ...sums])} FROM units GROUP BY variant`;
}

/** A value held down to a cap; NULL stays NULL (least() would make it the cap). */
export const capped = (x: Statement, cap: string | null, dialect: Dialect): Statement =>
  cap === null
    ? x
    : sql`CASE WHEN ${x} > CAST(${cap} AS ${dialect.sumType}) THEN CAST(${cap} AS ${dialect.sumType}) ELSE ${x} END`;

/**
 * Units per variant, those without a value, those whose value is not 0, and those above a cap.
 * Gives variant, units, none<p>, some<p>, over<p>.
 */
export function leftOut(values: readonly Statement[], caps: readonly (string | null)[], dialect: Dialect): Statement {
  const counts = values.flatMap((x, p) => {
    const cap = caps[p] ?? null;
    return [
      sql`count(*) - count(${x}) AS ${name(`none${p}`)}`,
      sql`count(*) FILTER (WHERE ${capped(x, cap, dialect)} <> 0) AS ${name(`some${p}`)}`,
      cap === null
        ? sql`0 AS ${name(`over${p}`)}`
        : sql`count(*) FILTER (WHERE ${x} > CAST(${cap} AS ${dialect.sumType})) AS ${name(`over${p}`)}`,
    ];
  });
  return sql`SELECT ${list([sql`variant`, sql`count(*) AS units`, ...counts])} FROM units GROUP BY variant`;
}

/** A ratio's score d = (a - R b) / mean(b), R and mean(b) of the unit's own arm; NULL in an arm without either. */
export function score(
  a: Statement,
  b: Statement,
  arms: readonly ({ readonly ratio: number; readonly meanOfB: number } | null)[],
  dialect: Dialect,
): Statement {
  const cases = arms.flatMap((arm, variant) =>
    arm === null
      ? []
      : [
          sql`WHEN ${variant} THEN ((${dialect.toDouble(a)}) - ${double(arm.ratio)} * (${dialect.toDouble(b)})) / ${double(arm.meanOfB)}`,
        ],
  );
  return cases.length === 0 ? sql`CAST(NULL AS DOUBLE)` : sql`CASE variant ${join(cases, "\n")} END`;
}

/** Smallest and largest of some doubles over all units, to find their scales. */
export function extremes(values: readonly Statement[], from: Statement = sql`units`): Statement {
  const ends = values.flatMap((x, i) => [
    sql`min(${x}) AS ${name(`least${i}`)}`,
    sql`max(${x}) AS ${name(`most${i}`)}`,
  ]);
  return sql`SELECT ${list(ends)} FROM ${from}`;
}

const list = (items: readonly Statement[]) => join(items, ", ");
