import type { Problem } from "../types.ts";
import { items, type Loose, mapping } from "./loose.ts";

/** Columns that the plan reads as something else, which divides no units: each unit would stand alone, or each arm. */
const ROLES = ["unit", "event-id", "variant", "time"] as const;

/** What divides the units: each column once, and none that tells single units, rows or arms apart. */
export function subgroupRules(plan: Loose): readonly Problem[] {
  const columns = Array.isArray(plan.subgroups) ? plan.subgroups : [];
  const entries = items(plan, "log").map(({ data }) => mapping(data.columns) ?? {});
  return columns.flatMap((column: unknown, i): readonly Problem[] => {
    if (typeof column !== "string") return [];
    const place = { path: ["subgroups", i], at: "value" } as const;
    if (columns.indexOf(column) < i) return [{ ...place, message: `${column} is named twice. Remove one of the two.` }];
    const role = ROLES.find((name) => entries.some((entry) => entry[name] === column));
    if (role === undefined) return [];
    const message = `This is the column of the ${role}, which makes no subgroups. Name another, or remove it.`;
    return [{ ...place, message }];
  });
}
