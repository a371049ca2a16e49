import { enrolledOf, levelOf } from "../../oracle/levels.ts";
import { count, type Rules, type Seen } from "./seen.ts";

const columnsOf = (seen: Seen, wanted: (column: string) => boolean): number => count(seen.plan.subgroups, wanted);

export const subgroupRules: Rules = {
  "two subgroup columns": ({ plan }) => plan.subgroups.length === 2,
  "a subgroup column of numbers": (seen) => columnsOf(seen, (column) => seen.plan.numericColumns.includes(column)),
  "a subgroup column that is the event's": (seen) =>
    columnsOf(seen, (column) => seen.plan.log.some(({ columns }) => columns.event === column)),
  "a level that is missing beside others": ({ trace }) =>
    count(trace.result.facts.subgroups, ({ levels }) => levels.length > 1 && levels.at(-1)?.level.kind === "missing"),
  "levels of one size, one before the other by text": ({ trace }) =>
    count(trace.result.facts.subgroups, ({ levels }) =>
      levels.some(({ enrolled, level }, i) => {
        const next = levels[i + 1];
        const units = (of: readonly number[]) => of.reduce((sum, n) => sum + n, 0);
        return level.kind === "value" && next?.level.kind === "value" && units(next.enrolled) === units(enrolled);
      }),
    ),
  "a level that two variants share": ({ trace }) =>
    count(trace.result.facts.subgroups, ({ levels }) =>
      levels.some(({ enrolled }) => enrolled.filter((units) => units > 0).length > 1),
    ),
  "a level by which one unit's rows differ": (seen) =>
    columnsOf(seen, (column) =>
      enrolledOf(seen.trace.units).some((unit) =>
        seen.trace.rows.some(
          (row) =>
            row.unit === unit.unit && row.rejected === null && row.cell(column) !== levelOf(seen.plan, column, unit),
        ),
      ),
    ),
};
