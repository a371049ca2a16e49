import type { SubgroupColumn } from "../../src/engine/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import { nanoText } from "./number.ts";
import { compareText } from "./order.ts";
import type { Unit } from "./units.ts";

/** A unit's value of a subgroup column, from its enrolling row: numbers of numeric columns by value, all else as text. */
export function levelOf(plan: Plan, column: string, { enrolling }: Unit): string | null {
  if (enrolling === null) return null;
  if (!plan.numericColumns.includes(column)) return enrolling.cell(column);
  const value = enrolling.number(column);
  return value === null ? null : nanoText(value);
}

const NOT_ENROLLED = ["not-enrolled", "outside-enrolment", "unknown-variant"];

/** Those past the line unknown-variant. */
export const enrolledOf = (units: readonly Unit[]): Unit[] => units.filter(({ line }) => !NOT_ENROLLED.includes(line));

const NAMED = 12;

/** The levels of a column over the enrolled units: the largest, the rest as one, the missing. */
export function levelsOf(plan: Plan, column: string, enrolled: readonly Unit[]): SubgroupColumn {
  const byLevel = new Map<string | null, Unit[]>();
  for (const unit of enrolled) {
    const level = levelOf(plan, column, unit);
    byLevel.set(level, [...(byLevel.get(level) ?? []), unit]);
  }
  const isNumeric = plan.numericColumns.includes(column);
  const order = (a: string, b: string) => (isNumeric ? Number(a) - Number(b) : compareText(a, b));
  const values = [...byLevel]
    .flatMap(([level, units]) => (level === null ? [] : [{ level, units }]))
    .sort((a, b) => b.units.length - a.units.length || order(a.level, b.level));
  const counts = (units: readonly Unit[]) =>
    plan.variants.map((_, variant) => units.filter((unit) => unit.variant === variant).length);
  const rest = values.slice(NAMED);
  const missing = byLevel.get(null) ?? [];
  return {
    column,
    levels: [
      ...values
        .slice(0, NAMED)
        .map(({ level, units }) => ({ level: { kind: "value" as const, text: level }, enrolled: counts(units) })),
      ...(rest.length === 0
        ? []
        : [
            {
              level: { kind: "rest" as const, levels: rest.length },
              enrolled: counts(rest.flatMap(({ units }) => units)),
            },
          ]),
      ...(missing.length === 0 ? [] : [{ level: { kind: "missing" as const }, enrolled: counts(missing) }]),
    ],
  };
}
