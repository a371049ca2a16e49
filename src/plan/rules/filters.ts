import type { Problem } from "../types.ts";
import { type Item, items, type Loose } from "./loose.ts";

/** What a filter removes, and by what it knows it. */
export function filterRules(plan: Loose): readonly Problem[] {
  return items(plan, "filters").flatMap(({ path, data }) => [
    ...howKnown({ path, data }),
    ...ofUnitsOnly({ path, data }),
  ]);
}

function howKnown({ path, data }: Item): readonly Problem[] {
  if ("where" in data && "listed-in" in data) {
    const message = "A filter has where or listed-in, not both. Make this a filter of its own.";
    return [{ path: [...path, "listed-in"], at: "key", message }];
  }
  if ("where" in data || "listed-in" in data) return [];
  const message =
    "This filter says nothing about what it removes. Add where, such as where: {is_staff: true}, or listed-in.";
  return [{ path, at: "key", message }];
}

function ofUnitsOnly({ path, data }: Item): readonly Problem[] {
  if (data.drop === "rows") {
    return ["when", "listed-in"]
      .filter((key) => key in data)
      .map((key) => {
        const message = `${key} is for filters of units; this one drops rows. Remove ${key}, or write drop: units.`;
        return { path: [...path, key], at: "key", message };
      });
  }
  if (!("when" in data && "listed-in" in data) || "where" in data) return [];
  const message = "when says at which rows a where looks; a list of units has none. Remove when.";
  return [{ path: [...path, "when"], at: "key", message }];
}
