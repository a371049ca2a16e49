import type { Plan } from "../plan/index.ts";
import { count, type Engine } from "./engine.ts";
import type { Layout } from "./layout.ts";
import { nanoText } from "./nano.ts";
import type { FilterValues } from "./soundnessTypes.ts";
import { commonestValues } from "./sql/index.ts";
import type { Reduction } from "./types.ts";

const VALUES_SHOWN = 5;

type Account = Pick<Reduction, "rowLines" | "unitLines">;

/** Of filters that removed nothing, the commonest values of their columns: often a value is written otherwise in the log. */
export async function valuesOfFilters(
  plan: Plan,
  layout: Layout,
  account: Account,
  engine: Engine,
): Promise<FilterValues[]> {
  const found: FilterValues[] = [];
  for (const filter of plan.filters) {
    if (!("where" in filter) || !isIdle(filter, account)) continue;
    const columns = [...new Set(filter.where.map(({ column }) => column))].filter((column) => !isId(plan, column));
    const values: FilterValues["columns"][number][] = [];
    for (const column of columns) values.push({ column, values: await commonest(layout, column, engine) });
    found.push({ filter: filter.name, columns: values });
  }
  return found;
}

function isIdle({ name, drop }: Plan["filters"][number], { rowLines, unitLines }: Account): boolean {
  const id = `filter:${name}`;
  return drop === "rows"
    ? rowLines.some((line) => line.id === id && line.rows === 0)
    : unitLines.some((line) => line.id === id && line.units === 0);
}

/** No id of a unit, and no other that is nearly one, may reach the report. */
const isId = (plan: Plan, column: string) =>
  plan.log.some(({ columns }) => columns.unit === column || columns.eventId === column);

async function commonest(layout: Layout, column: string, engine: Engine) {
  const rows = await engine.query(commonestValues(layout, layout.columns.indexOf(column), VALUES_SHOWN));
  return rows.map((row) => {
    const { value } = row;
    return {
      value: typeof value === "object" && value !== null ? nanoText(value.nano) : String(value),
      rows: count(row, "rows"),
    };
  });
}
