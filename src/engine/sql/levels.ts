import { join, name, type Statement, sql } from "./sql.ts";

/** Levels of a subgroup column: the value on each enrolled unit's enrolling row; c is the column's place in the layout. */

const enrolledUnits = (unknownVariantLine: number): Statement => sql`enrolments WHERE line > ${unknownVariantLine}`;

/** The values that most enrolled units have. Gives level, units; equal numbers of units go by the value. */
export const largestLevels = (c: number, unknownVariantLine: number, limit: number): Statement => sql`
  SELECT ${name(`g${c}`)} AS level, count(*) AS units
  FROM ${enrolledUnits(unknownVariantLine)} AND ${name(`g${c}`)} IS NOT NULL
  GROUP BY level ORDER BY units DESC, level LIMIT ${limit}`;

/** How many values there are. Gives levels. */
export const numberOfLevels = (c: number, unknownVariantLine: number): Statement => sql`
  SELECT count(DISTINCT ${name(`g${c}`)}) AS levels FROM ${enrolledUnits(unknownVariantLine)}`;

/** Enrolled units by level code and variant. Gives code, variant, units. */
export const enrolledByLevel = (code: Statement, unknownVariantLine: number): Statement => sql`
  SELECT ${code} AS code, variant, count(*) AS units
  FROM ${enrolledUnits(unknownVariantLine)}
  GROUP BY code, variant`;

/** A level's code over a row of enrolments: its place among the named values, or the rest's, or that of a missing value. */
export function levelCode(c: number, values: readonly Statement[], rest: number, missing: number): Statement {
  const level = name(`g${c}`);
  const cases = values.map((value, code) => sql`WHEN ${level} = ${value} THEN ${code}`);
  return sql`CAST(CASE WHEN ${level} IS NULL THEN ${missing} ${join(cases, "\n")} ELSE ${rest} END AS SMALLINT)`;
}
