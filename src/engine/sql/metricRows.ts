import type { Plan } from "../../plan/types.ts";
import { FATE, type Layout, type PartLayout } from "../layout.ts";
import { followUpUs } from "./enrolments.ts";
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
 * The rows that some metric's part matches, by where they ended, for the ledger of each metric: one pass over the rows.
 * A row that ended before its unit did joins nothing. That is said by its key, for a further condition in ON made the engine
 * compare every row with every unit.
 * Reads   rows, enrolments
 * Gives   fate, line (of the unit, NULL for a row that ended before), place (of PLACE), and per part rows<i> and sum<i>, the
 *         exact sum of its column, NULL where no row holds a number
 */
export function metricRows(plan: Plan, layout: Layout, parts: readonly PartLayout[]): Statement {
  const matches = [...new Set(parts.map(({ match }) => match))].map((match) => name(`m${match}`));
  const values = [...new Set(parts.flatMap(({ value }) => (value === null ? [] : [value])))];
  const sums = parts.flatMap((part, i) => [
    sql`count(*) FILTER (WHERE ${name(`m${part.match}`)}) AS ${name(`rows${i}`)}`,
    ...(part.value === null
      ? []
      : [sql`sum(${name(`v${part.value}`)}) FILTER (WHERE ${name(`m${part.match}`)}) AS ${name(`sum${i}`)}`]),
  ]);
  return sql`
    SELECT ${list([sql`fate, line, place`, ...sums])}
    FROM (
      SELECT ${list([
        sql`r.fate, e.line, CAST(${placeOf(plan, layout)} AS TINYINT) AS place`,
        ...matches.map((match) => sql`r.${match}`),
        ...values.map((value) => sql`r.${name(`v${value}`)}`),
      ])}
      FROM rows AS r
      LEFT JOIN enrolments AS e ON e.unit = CASE WHEN r.fate = ${FATE.seen} THEN r.unit END
      WHERE (${join(
        matches.map((match) => sql`r.${match}`),
        " OR ",
      )}) AND r.reason NOT IN (${UNREADABLE})
    )
    GROUP BY fate, line, place`;
}

const list = (items: readonly Statement[]) => join(items, ", ");
