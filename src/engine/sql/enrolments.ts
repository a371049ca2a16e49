import type { Plan } from "../../plan/types.ts";
import { FATE, type IncidentLayout, type Layout, unitLineIds } from "../layout.ts";
import { contentOrder } from "./duplicates.ts";
import { stored } from "./rows.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/**
 * A row's place among those that may enrol its unit, as one integer: time first, then the variant in plan order (names
 * that the plan lacks after those it has). min() of it settles time, ties and variant at once.
 */
export interface EnrolmentKey {
  readonly baseUs: bigint;
  readonly places: bigint;
  /** Whether the span of times needs 128 bits. */
  readonly wide: boolean;
}

export function enrolmentKey(plan: Plan, firstUs: bigint | null, lastUs: bigint | null): EnrolmentKey {
  let places = 2n;
  while (places < BigInt(plan.variants.length) + 1n) places *= 2n;
  const span = firstUs === null || lastUs === null ? 0n : lastUs - firstUs;
  return { baseUs: firstUs ?? 0n, places, wide: (span + 1n) * places >= 1n << 62n };
}

/** Over a row of `rows`. */
export function keyOf(key: EnrolmentKey): Statement {
  const at = key.wide ? sql`CAST(coalesce(at_us, ${key.baseUs}) AS HUGEINT)` : sql`coalesce(at_us, ${key.baseUs})`;
  return sql`(${at} - ${key.baseUs}) * ${key.places} + variant`;
}

/**
 * Stage 4: the units seen, and the key of the row that enrols each.
 * Reads   rows
 * Writes  seen: unit, key (NULL: no row enrols it), switched (whether its rows name two variants of the plan), rows, e<i>
 *         (whether some row meets unit filter condition i)
 */
export function seen(plan: Plan, layout: Layout, key: EnrolmentKey): Statement {
  const flags = layout.flags.map((_, i) => sql`bool_or(${name(`w${i}`)}) AS ${name(`e${i}`)}`);
  const ofPlan = sql`variant < ${plan.variants.length}`;
  return sql`
    CREATE TEMP TABLE seen AS
    SELECT ${list([
      sql`unit`,
      sql`min(${keyOf(key)}) FILTER (WHERE enrols) AS key`,
      sql`coalesce(min(variant) FILTER (WHERE ${ofPlan}) < max(variant) FILTER (WHERE ${ofPlan}), FALSE) AS switched`,
      sql`count(*) AS rows`,
      ...flags,
    ])}
    FROM rows
    WHERE fate = ${FATE.seen}
    GROUP BY unit`;
}

/**
 * Stage 5: each unit's enrolling row, for what is judged at enrolment. Several rows of a unit may stand at its key: the
 * first in canonical order is taken, and only such units are ordered.
 * Reads   rows, seen
 * Writes  at_enrolment: unit, a<i> (unit filter condition i on the enrolling row), z<c> (a covariate column's value on it),
 *         g<c> (a subgroup column's)
 */
export function atEnrolment(layout: Layout, key: EnrolmentKey): Statement {
  const taken = [
    ...layout.flags.map((_, i) => sql`${name(`w${i}`)} AS ${name(`a${i}`)}`),
    ...layout.covariateColumns.map((c) => sql`${name(`v${c}`)} AS ${name(`z${c}`)}`),
    ...layout.subgroupColumns.map((c) => sql`${stored(layout, c)} AS ${name(`g${c}`)}`),
  ];
  const order = join([sql`other_variant ASC NULLS LAST`, ...contentOrder(layout)], ", ");
  return sql`
    CREATE TEMP TABLE at_enrolment AS
    WITH first AS MATERIALIZED (
      SELECT r.*
      FROM rows AS r
      JOIN seen AS s ON s.unit = r.unit AND s.key = ${keyOf(key)}
      WHERE r.fate = ${FATE.seen} AND r.enrols
    ), tied AS (
      SELECT unit FROM first GROUP BY unit HAVING count(*) > 1
    )
    SELECT ${list([sql`unit`, ...taken])}
    FROM first
    WHERE unit NOT IN (SELECT unit FROM tied)
    UNION ALL
    SELECT ${list([sql`unit`, ...taken])}
    FROM (
      SELECT *, row_number() OVER (PARTITION BY unit ORDER BY ${order}) AS place
      FROM first
      WHERE unit IN (SELECT unit FROM tied)
    )
    WHERE place = 1`;
}

/** Whether something is judged, or taken, at enrolment. */
export const needsEnrollingRow = (layout: Layout): boolean =>
  layout.covariateColumns.length > 0 ||
  layout.subgroupColumns.length > 0 ||
  layout.unitFilters.some((filter) => filter.kind === "at-enrolment") ||
  layout.incidents.some(({ flag }) => flag !== null);

/**
 * Stage 6: each unit and the line on which it ends (DESIGN 4, rule 6), first that applies.
 * Reads   seen, at_enrolment (where something is judged at enrolment), list_<i>
 * Writes  enrolments: unit, rows, enrolled_us, variant, switched, z<c> and g<c> of stage 5, line (index into unitLineIds), and for other reasonable
 *         choices whether the unit were analysed if units in two variants were treated the other way (other_way) or if
 *         follow-up need not be complete (any_follow_up); i<k>: whether it enrolled in incident k
 */
export function enrolments(plan: Plan, layout: Layout, key: EnrolmentKey, logEndUs: bigint | null): Statement {
  const variants = plan.variants.length;
  const ids = unitLineIds(plan);
  const line = (id: string) => ids.indexOf(id);
  const { fromUs, beforeUs } = plan.enrolment;
  const isOutside = [
    ...(fromUs === null ? [] : [sql`enrolled_us < ${fromUs}`]),
    ...(beforeUs === null ? [] : [sql`enrolled_us >= ${beforeUs}`]),
  ];
  const filters = layout.unitFilters.map((filter) => {
    const condition =
      filter.kind === "listed"
        ? sql`unit IN (SELECT id FROM ${name(`list_${filter.list}`)})`
        : name(`${filter.kind === "ever" ? "e" : "a"}${filter.flag}`);
    return sql`WHEN ${condition} THEN ${line(`filter:${filter.name}`)}`;
  });
  const dates = isOutside.length === 0 ? [] : [sql`WHEN ${join(isOutside, " OR ")} THEN ${line("outside-enrolment")}`];
  const enrolled = [
    sql`WHEN key IS NULL THEN ${line("not-enrolled")}`,
    ...dates,
    sql`WHEN variant = ${variants} THEN ${line("unknown-variant")}`,
  ];
  const switchers = [sql`WHEN switched THEN ${line("switched")}`];
  const late =
    plan.followUp?.incomplete === "exclude" && logEndUs !== null
      ? [sql`WHEN enrolled_us + ${followUpUs(plan)} > ${logEndUs} THEN ${line("follow-up")}`]
      : [];
  const isExcluding = plan.enrolment.inTwoVariants === "exclude";
  const analysed = line("analysed");
  const ends = (...cases: (readonly Statement[])[]) =>
    sql`CAST(CASE ${join([...enrolled, ...cases.flat()], "\n")} ELSE ${analysed} END AS SMALLINT)`;
  const usesEnrolment = needsEnrollingRow(layout);
  return sql`
    CREATE TEMP TABLE enrolments AS
    SELECT ${list([
      sql`unit, rows, enrolled_us, variant, switched`,
      ...layout.covariateColumns.map((c) => name(`z${c}`)),
      ...layout.subgroupColumns.map((c) => name(`g${c}`)),
      sql`${ends(isExcluding ? switchers : [], filters, late)} AS line`,
      sql`${ends(isExcluding ? [] : switchers, filters, late)} = ${analysed} AS other_way`,
      sql`${ends(isExcluding ? switchers : [], filters)} = ${analysed} AS any_follow_up`,
      ...layout.incidents.map((incident, k) => sql`${isIn(incident)} AS ${name(`i${k}`)}`),
    ])}
    FROM (
      SELECT ${list([
        sql`s.*`,
        sql`CAST(s.key // ${key.places} AS BIGINT) + ${key.baseUs} AS enrolled_us`,
        sql`CAST(s.key % ${key.places} AS SMALLINT) AS variant`,
        ...(usesEnrolment ? [sql`a.* EXCLUDE (unit)`] : []),
      ])}
      FROM seen AS s ${usesEnrolment ? sql`LEFT JOIN at_enrolment AS a ON a.unit = s.unit` : sql``}
    )`;
}

/** FALSE for a unit that no row enrols. */
function isIn({ fromUs, beforeUs, flag }: IncidentLayout): Statement {
  const there = flag === null ? sql`` : sql` AND ${name(`a${flag}`)}`;
  return sql`coalesce(enrolled_us >= ${fromUs} AND enrolled_us < ${beforeUs}${there}, FALSE)`;
}

/** Length of follow-up in microseconds; days are of 24 hours. */
export const followUpUs = (plan: Plan): bigint => daysUs(plan.followUp?.days ?? 0);

export const daysUs = (days: number): bigint => BigInt(Math.round(days * 86_400_000_000));

const list = (items: readonly Statement[]) => join(items, ", ");
