import type { Problem } from "../types.ts";
import { allMetrics, items, type Loose } from "./loose.ts";

/** Variants, metrics, filters and incidents have names of their own, each among its own. */
export function nameRules(plan: Loose): readonly Problem[] {
  return (["variants", "metrics", "filters", "incidents"] as const).flatMap((section) => {
    const all = section === "metrics" ? allMetrics(plan) : items(plan, section);
    const named = all.filter(({ data }) => typeof data.name === "string");
    return named.flatMap(({ path, data }, i): readonly Problem[] => {
      if (named.findIndex((other) => other.data.name === data.name) === i) return [];
      const message = `This name stands a second time in ${section}. Give each its own.`;
      return [{ path: [...path, "name"], at: "value", message }];
    });
  });
}
