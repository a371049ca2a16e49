import type { Plan } from "../../plan/types.ts";
import { FATE, type Layout } from "../layout.ts";
import { contentOrder } from "./duplicates.ts";
import { type EnrolmentKey, followUpUs, keyOf } from "./enrolments.ts";
import { stored } from "./rows.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/** Counts for the soundness checks. All read tables of a few stages; none writes. */

/** Enrolled units by a group (an expression over enrolments), the line on which they end, and variant. */
export const endedByGroup = (group: Statement, unknownVariantLine: number): Statement => sql`
  SELECT ${group} AS place, line, variant, count(*) AS units
  FROM enrolments WHERE line > ${unknownVariantLine}
  GROUP BY ${group}, line, variant`;

/** Analysed units whose follow-up the log does not hold to its end. */
export const unfollowed = (plan: Plan, analysedLine: number, logEndUs: bigint): Statement => sql`
  SELECT variant, count(*) AS units
  FROM enrolments WHERE line = ${analysedLine} AND enrolled_us + ${followUpUs(plan)} > ${logEndUs}
  GROUP BY variant`;

/** Which fates took an enrolling row. */
export const fatesOfEnrolling = (): Statement => sql`
  SELECT DISTINCT fate FROM rows WHERE enrols AND unit IS NOT NULL AND fate <> ${FATE.seen}`;

/**
 * Units that some line of the ledger took an enrolling row of: by first variant, those enrolled if the lines from a fate on
 * had taken no row. Fates stand in the ledger's order.
 * Gives   fate, variant, units; FATE.seen: as they are enrolled in fact
 */
export function enrolledWithout(plan: Plan, layout: Layout, fates: readonly number[]): Statement {
  const { fromUs, beforeUs } = plan.enrolment;
  const within = [
    sql`place = 1 AND variant < ${plan.variants.length}`,
    ...(fromUs === null ? [] : [sql`at_us >= ${fromUs}`]),
    ...(beforeUs === null ? [] : [sql`at_us < ${beforeUs}`]),
  ];
  const counted = [FATE.seen, ...fates].map((fate) => {
    const kept = fate === FATE.seen ? sql`fate = ${FATE.seen}` : sql`(fate = ${FATE.seen} OR fate >= ${fate})`;
    return sql`
      SELECT ${fate} AS fate, variant, count(*) AS units
      FROM (
        SELECT variant, at_us, row_number() OVER (PARTITION BY unit ORDER BY at_us, variant) AS place
        FROM touched WHERE ${kept}
      )
      WHERE ${join(within, " AND ")}
      GROUP BY variant`;
  });
  const timed = layout.hasTime ? sql`AND at_us IS NOT NULL` : sql``;
  return sql`
    WITH touched AS MATERIALIZED (
      SELECT unit, at_us, variant, fate
      FROM rows
      WHERE enrols ${timed} AND unit IN (
        SELECT unit FROM rows WHERE enrols ${timed} AND unit IS NOT NULL AND fate <> ${FATE.seen}
      )
    )
    ${join(counted, "\nUNION ALL\n")}`;
}

/** Units with an enrolling row that reaches the row filters, by the variant that it names, and those of which a filter took one. */
export function enrollingUnits(plan: Plan, layout: Layout): Statement {
  const taken = layout.rowFilters.map(
    (_, i) => sql`count(DISTINCT unit) FILTER (WHERE fate = ${FATE.firstFilter + i}) AS ${name(`taken${i}`)}`,
  );
  return sql`
    SELECT ${join([sql`variant`, sql`count(DISTINCT unit) AS units`, ...taken], ", ")}
    FROM rows
    WHERE enrols AND variant < ${plan.variants.length} AND (fate = ${FATE.seen} OR fate >= ${FATE.firstFilter})
    GROUP BY variant`;
}

/**
 * Enrolled units whose enrolling row some metric counts, by its event. Where several rows of a unit stand at its key the
 * first in canonical order enrols it; only units with a row at it that counts are ordered.
 */
export function enrolledByMetricRows(layout: Layout, key: EnrolmentKey, unknownVariantLine: number): Statement {
  const counts = join(
    layout.matches.map((_, i) => name(`m${i}`)),
    " OR ",
  );
  const atKey = sql`r.unit = s.unit AND s.key = ${keyOf(key)} AND r.fate = ${FATE.seen} AND r.enrols`;
  const order = join([sql`other_variant ASC NULLS LAST`, ...contentOrder(layout)], ", ");
  return sql`
    WITH hit AS (
      SELECT DISTINCT r.unit
      FROM rows AS r
      JOIN seen AS s ON ${atKey}
      WHERE ${counts}
    ), first AS (
      SELECT r.*
      FROM rows AS r
      JOIN seen AS s ON ${atKey}
      WHERE r.unit IN (SELECT unit FROM hit)
        AND r.unit IN (SELECT unit FROM enrolments WHERE line > ${unknownVariantLine})
    )
    SELECT event AS value, count(*) AS units
    FROM (
      SELECT event, ${counts} AS counts, row_number() OVER (PARTITION BY unit ORDER BY ${order}) AS place
      FROM first
    )
    WHERE place = 1 AND counts
    GROUP BY event ORDER BY units DESC, value NULLS LAST`;
}

/** The commonest values of a column, as they are stored. */
export const commonestValues = (layout: Layout, c: number, limit: number): Statement => sql`
  SELECT ${stored(layout, c)} AS value, count(*) AS rows
  FROM rows WHERE fate <> ${FATE.rejected} AND ${stored(layout, c)} IS NOT NULL
  GROUP BY ${stored(layout, c)} ORDER BY rows DESC, value LIMIT ${limit}`;
