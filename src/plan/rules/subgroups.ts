import type { Problem } from "../types.ts";
import type { Path } from "../yaml.ts";
import { items, type Loose, mapping } from "./loose.ts";

/** Columns that the plan reads as something else, which divides no units: each unit would stand alone, or each arm. */
const ROLES = ["unit", "event-id", "variant", "time"] as const;

/** What divides the units: each column once, and none that tells single units, rows or arms apart. */
export function subgroupRules(plan: Loose): readonly Problem[] {
  const asked = mapping(plan["asked-afterwards"])?.subgroups;
  const named = [...columnsAt(plan.subgroups, ["subgroups"]), ...columnsAt(asked, ["asked-afterwards", "subgroups"])];
  const entries = items(plan, "log").map(({ data }) => mapping(data.columns) ?? {});
  return named.flatMap(({ column, path }, i): readonly Problem[] => {
    const place = { path, at: "value" } as const;
    if (named.findIndex((other) => other.column === column) < i)
      return [{ ...place, message: `${column} is named twice. Remove one of the two.` }];
    const role = ROLES.find((name) => entries.some((entry) => entry[name] === column));
    if (role === undefined) return [];
    const message = `This is the column of the ${role}, which makes no subgroups. Name another, or remove it.`;
    return [{ ...place, message }];
  });
}

function columnsAt(list: unknown, path: Path): { readonly column: string; readonly path: Path }[] {
  const columns: readonly unknown[] = Array.isArray(list) ? list : [];
  return columns.flatMap((column, i) => (typeof column === "string" ? [{ column, path: [...path, i] }] : []));
}
