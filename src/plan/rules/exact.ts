import type { Problem } from "../types.ts";
import { decimalAt, type YamlText } from "../yaml.ts";
import { allMetrics, type Loose } from "./loose.ts";

/** A cap is held against the log's values, which have at most 9 places and lie below 10^18 (DESIGN 5). */
export function exactRules(plan: Loose, yaml: YamlText): readonly Problem[] {
  return allMetrics(plan).flatMap(({ path }): readonly Problem[] => {
    const place = [...path, "cap", "at"];
    const [whole = "", fraction = ""] = (decimalAt(yaml, place) ?? "").replace("-", "").split(".");
    if (whole.length <= 18 && fraction.length <= 9) return [];
    const message = "Expected a number below 10^18 with at most 9 decimal places, as the log's values are read.";
    return [{ path: place, at: "value", message }];
  });
}
