import type { Problem } from "../types.ts";
import type { Path } from "../yaml.ts";
import { items, type Loose, mapping } from "./loose.ts";

/** What the plan's format knows and this version does not compute. */
export function laterRules(plan: Loose): readonly Problem[] {
  const decision = mapping(plan.decision) ?? {};
  const metrics = items(plan, "metrics");
  const quantiles = metrics.filter(({ data }) => data.summary === "quantile");
  const adjusted = metrics.filter(({ data }) => "adjust-for" in data);
  return [
    ...quantiles.map(({ path }) =>
      notBuilt(
        [...path, "summary"],
        "value",
        "summary: quantile",
        "Take mean, proportion or ratio-of-totals, or remove the metric.",
      ),
    ),
    ...adjusted.map(({ path }) => notBuilt([...path, "adjust-for"], "key", "adjust-for", "Remove it.")),
    ...("subgroups" in plan ? [notBuilt(["subgroups"], "key", "subgroups", "Remove it.")] : []),
    ...("forecast" in plan ? [notBuilt(["forecast"], "key", "forecast", "Remove it.")] : []),
    ...(decision.primaries === "any"
      ? [notBuilt(["decision", "primaries"], "value", "primaries: any", "Write all, or remove the key.")]
      : []),
    ...(decision.interval === "skew-corrected"
      ? [notBuilt(["decision", "interval"], "value", "interval: skew-corrected", "Write normal, or remove the key.")]
      : []),
  ];
}

function notBuilt(path: Path, at: "key" | "value", what: string, remedy: string): Problem {
  return { path, at, message: `${what} is not built yet. ${remedy}` };
}
