import type { Plan } from "../../plan/types.ts";
import { FATE, type Layout, unitLineIds } from "../layout.ts";
import { daysUs, followUpUs } from "./enrolments.ts";
import { REASON } from "./rows.ts";
import { join, name, type Statement, sql } from "./sql.ts";

/** Where a row of an analysed unit falls. */
export const PLACE = { before: -1, inside: 0, after: 1 } as const;

/** What a row of `r` is to its unit's enrolment in `e`. */
export function placeOf(plan: Plan, layout: Layout): Statement {
  if (!layout.hasTime) return sql`${PLACE.inside}`;
  const after =
    plan.followUp === null ? sql`` : sql`WHEN r.at_us >= e.enrolled_us + ${followUpUs(plan)} THEN ${PLACE.after}`;
  return sql`CASE WHEN r.at_us < e.enrolled_us THEN ${PLACE.before} ${after} ELSE ${PLACE.inside} END`;
}

// A record that was not cut into cells shows neither its event nor its columns: no metric can claim it.
const UNREADABLE = sql`${REASON.unreadable}, ${REASON.notText}, ${REASON.notObject}, ${REASON.tooLong}`;

/**
 * Stage 7: the rows that some metric's part matches, with their unit. Later stages read these alone and by a number, where
 * `rows` holds far more and the id is text. A row that ended before its unit did has none. That is said by its key, for a
 * further condition in ON made the engine compare every row with every unit.
 * Reads   rows, enrolments
 * Writes  matched: id (the enrolments' rowid) and line of the unit, kept (whether the unit is analysed, or would be under
 *         another reasonable choice), place (of PLACE), fate, at_us, enrolled_us, m<i>, v<c> of the parts' columns, b<m>
 *         (whether the row lies in the days before enrolment that the metric's covariate looks at)
 */
export function matched(plan: Plan, layout: Layout): Statement {
  const analysed = unitLineIds(plan).length - 1;
  const matches = layout.matches.map((_, i) => sql`r.${name(`m${i}`)}`);
  const values = [...new Set(layout.parts.flatMap(({ value }) => (value === null ? [] : [value])))];
  return sql`
    CREATE TEMP TABLE matched AS
    SELECT ${list([
      sql`e.rowid AS id, e.line, coalesce(e.line = ${analysed} OR e.other_way OR e.any_follow_up, FALSE) AS kept`,
      sql`CAST(${placeOf(plan, layout)} AS TINYINT) AS place, r.fate, r.at_us, e.enrolled_us`,
      ...matches,
      ...values.map((value) => sql`r.${name(`v${value}`)}`),
      ...daysBefore(plan),
    ])}
    FROM rows AS r
    LEFT JOIN enrolments AS e ON e.unit = CASE WHEN r.fate = ${FATE.seen} THEN r.unit END
    WHERE (${join(matches, " OR ")}) AND r.reason NOT IN (${UNREADABLE})`;
}

function daysBefore(plan: Plan): Statement[] {
  return plan.metrics.flatMap((metric, m) =>
    metric.adjustFor?.kind === "days-before"
      ? [sql`coalesce(r.at_us >= e.enrolled_us - ${daysUs(metric.adjustFor.days)}, FALSE) AS ${name(`b${m}`)}`]
      : [],
  );
}

const list = (items: readonly Statement[]) => join(items, ", ");
