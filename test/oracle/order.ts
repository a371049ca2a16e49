import type { Plan } from "../../src/plan/types.ts";
import type { Row } from "./types.ts";
import type { Cell } from "./where.ts";

/** The canonical order of rows (rule 3). 0 only for rows that are equal in all that the plan names. */
export function canonicalOrder(plan: Plan): (a: Row, b: Row) => number {
  return (a, b) => {
    const steps = [
      () => compareTimes(a.us, b.us),
      () => variantPlace(plan, a) - variantPlace(plan, b) || compareText(a.variant, b.variant),
      () => compareText(a.event, b.event),
      ...plan.columns.map((column) => () => compareColumn(plan, column, a, b)),
    ];
    for (const step of steps) {
      const order = step();
      if (order !== 0) return order;
    }
    return 0;
  };
}

/** Whether two rows differ in a column that the plan names; numbers and times count by their value. */
export function differ(plan: Plan, a: Row, b: Row): boolean {
  return a.unit !== b.unit || canonicalOrder(plan)(a, b) !== 0;
}

function compareTimes(a: bigint | null, b: bigint | null): number {
  if (a === null || b === null || a === b) return 0;
  return a < b ? -1 : 1;
}

/** The plan's variants in plan order, then others, then missing. */
function variantPlace(plan: Plan, row: Row): number {
  if (row.variantIndex === null) return plan.variants.length + 1;
  return row.variantIndex === -1 ? plan.variants.length : row.variantIndex;
}

function compareColumn(plan: Plan, column: string, a: Row, b: Row): number {
  if (!plan.numericColumns.includes(column)) return compareText(a.cell(column), b.cell(column));
  const left = a.number(column);
  const right = b.number(column);
  if (left === right) return 0;
  if (left === null || right === null) return left === null ? 1 : -1;
  return left < right ? -1 : 1;
}

/** By UTF-8 bytes, missing last. */
export function compareText(a: Cell, b: Cell): number {
  if (a === b) return 0;
  if (a === null || b === null) return a === null ? 1 : -1;
  return Buffer.compare(Buffer.from(a, "utf8"), Buffer.from(b, "utf8"));
}
