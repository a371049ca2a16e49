import type { Plan } from "../plan/index.ts";
import { count, type Engine, nano, type Row, text } from "./engine.ts";
import { type Layout, unitLineIds } from "./layout.ts";
import { nanoText } from "./nano.ts";
import {
  type Dialect,
  enrolledByLevel,
  largestLevels,
  levelCode,
  numberOfLevels,
  type Statement,
  sql,
} from "./sql/index.ts";
import type { Level, SubgroupColumn } from "./types.ts";

/** How many values of a column stand by themselves (DESIGN 4). */
export const LEVELS_NAMED = 12;

/** A subgroup column's levels, and a unit's as a code: text would weigh on every later stage. */
export interface Levels {
  readonly found: SubgroupColumn;
  /** Over a row of enrolments; the level's place in `found`. */
  readonly code: Statement;
}

export const levels = (plan: Plan, layout: Layout, engine: Engine, dialect: Dialect): Promise<Levels[]> =>
  Promise.all(layout.subgroupColumns.map((c) => levelsOf(plan, layout, c, engine, dialect)));

async function levelsOf(plan: Plan, layout: Layout, c: number, engine: Engine, dialect: Dialect): Promise<Levels> {
  const unknown = unitLineIds(plan).indexOf("unknown-variant");
  const isNumeric = layout.numeric[c] === true;
  const named = await engine.query(largestLevels(c, unknown, LEVELS_NAMED));
  const values = named.map((row) => (isNumeric ? nanoText(nano(row, "level")) : text(row, "level")));
  const [distinct = {}] = await engine.query(numberOfLevels(c, unknown));
  const beyond = count(distinct, "levels") - values.length;
  const all: Level[] = [
    ...values.map((value): Level => ({ kind: "value", text: value })),
    ...(beyond > 0 ? [{ kind: "rest", levels: beyond } as const] : []),
    { kind: "missing" },
  ];
  const written = values.map((value) => (isNumeric ? sql`CAST(${value} AS ${dialect.valueType})` : sql`${value}`));
  const code = levelCode(c, written, values.length, all.length - 1);
  const rows = await engine.query(enrolledByLevel(code, unknown));
  const counted = all.map((level, i) => ({ level, enrolled: plan.variants.map((_, v) => unitsOf(rows, i, v)) }));
  // Only the last may be empty, so the places of the others stay.
  const levels = counted.filter(({ enrolled }) => enrolled.some((units) => units > 0));
  return { found: { column: layout.columns[c] ?? "", levels }, code };
}

function unitsOf(rows: readonly Row[], code: number, variant: number): number {
  const row = rows.find((found) => count(found, "code") === code && count(found, "variant") === variant);
  return row === undefined ? 0 : count(row, "units");
}
