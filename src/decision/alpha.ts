import type { Metric, Plan } from "../plan/types.ts";

/** alpha of all intervals of one metric together; where any one primary is enough, each of them has its part. */
export function alphaOf({ decision, metrics }: Plan, { role }: Metric): number {
  const alpha = 1 - decision.confidence;
  if (role !== "primary" || decision.primaries === "all") return alpha;
  return alpha / metrics.filter((metric) => metric.role === "primary").length;
}
