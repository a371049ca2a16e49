import { count, type Engine } from "./engine.ts";
import { type Dialect, type Statement, sizes } from "./sql/index.ts";
import type { SizeTable } from "./types.ts";

/** Units by the size of each value, one table a value; of every arm and size that some unit has. */
export async function sizeTables(values: readonly Statement[], engine: Engine, dialect: Dialect): Promise<SizeTable[]> {
  if (values.length === 0) return [];
  const rows = await engine.query(sizes(values, dialect));
  return values.map((_, part) => {
    const own = rows.filter((row) => Number(row.part) === part);
    return {
      variant: own.map((row) => Number(row.variant)),
      sign: own.map((row) => Math.sign(Number(row.sign))),
      quarter: own.map((row) => (row.class === null ? null : Number(row.class))),
      units: own.map((row) => count(row, "units")),
    };
  });
}
