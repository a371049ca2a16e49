import { dataAt } from "../schema-walk.ts";
import type { Problem } from "../types.ts";
import type { Path } from "../yaml.ts";
import { items, type Loose } from "./loose.ts";

/** Something that the plan's format knows and this version does not compute. */
export interface Later {
  /** Of one metric the path inside it, else the path in the plan. */
  readonly of: "plan" | "metric";
  readonly path: Path;
  /** The value that is not built; without it the key as a whole. */
  readonly value?: string;
  readonly remedy: string;
}

/** One line a feature; it goes when the feature comes. */
export const LATER: readonly Later[] = [];

export function laterProblems(plan: Loose, later: readonly Later[]): readonly Problem[] {
  return later.flatMap(({ of, path, value, remedy }) => {
    const places = of === "metric" ? items(plan, "metrics").map((metric) => [...metric.path, ...path]) : [path];
    const key = String(path.at(-1));
    return places
      .filter((place) => (value === undefined ? dataAt(plan, place) !== undefined : dataAt(plan, place) === value))
      .map((place): Problem => {
        const what = value === undefined ? key : `${key}: ${value}`;
        const message = `${what} is not built yet. ${remedy}`;
        return { path: place, at: value === undefined ? "key" : "value", message };
      });
  });
}
