import type { Amount, Metric } from "../plan/types.ts";
import type { Contrast } from "../stats/types.ts";
import type { Zone } from "./types.ts";

/** The ends of an interval; one that is null is unbounded or does not exist, and satisfies no inequality. */
export interface Ends {
  readonly low: number | null;
  readonly high: number | null;
}

export interface Placed {
  readonly zone: Zone;
  readonly eitherWay: boolean;
}

/**
 * Where a contrast's interval lies against the metric's rule (METHODS 2). Signs are turned so that more is better; a
 * relative worthwhile effect or margin is held against the relative interval, everything else against the difference's.
 */
export function placed(metric: Metric, contrast: Pick<Contrast, "difference" | "relative">): Placed {
  const rule = ruleOf(metric);
  const ends = turned(metric, heldAgainst(rule, contrast));
  const size = rule?.value ?? 0;
  if (metric.role === "guardrail") return { zone: guardrailZone(ends, size), eitherWay: false };
  const zone = gainZone(ends, size);
  return { zone, eitherWay: metric.role === "primary" && zone === "no-worthwhile-gain" && above(ends.low, -size) };
}

/** Zones of a primary with worthwhile effect w, 0 where none is given; of secondary metrics with w = 0. First that holds. */
export function gainZone({ low, high }: Ends, w: number): Zone {
  if (w > 0 && above(low, w)) return "worthwhile";
  if (below(high, 0)) return "worse";
  if (w > 0 && above(low, 0) && below(high, w)) return "too-small";
  if (above(low, 0)) return "better";
  if (w > 0 && below(high, w)) return "no-worthwhile-gain";
  return "not-settled";
}

/** Zones of a guardrail with margin m: decided by the harm side of the interval. */
export function guardrailZone({ low, high }: Ends, m: number): Zone {
  if (above(low, -m)) return "within";
  if (below(high, -m)) return "beyond";
  return "not-settled";
}

/** What the plan asks of a metric: the worthwhile effect of a primary, the margin of a guardrail. */
export function ruleOf(metric: Metric): Amount | null {
  if (metric.role === "secondary") return null;
  if (metric.role === "primary") return metric.worthwhile;
  if (metric.margin === null) throw new Error(`the guardrail ${metric.name} came here without a margin`);
  return metric.margin;
}

/** The interval turned so that more is better: where lower is good its ends change places and signs. */
export function turned(metric: Pick<Metric, "goodIs">, { low, high }: Ends): Ends {
  if (metric.goodIs === "higher") return { low, high };
  return { low: high === null ? null : -high, high: low === null ? null : -low };
}

function heldAgainst(rule: Amount | null, contrast: Pick<Contrast, "difference" | "relative">): Ends {
  if (rule?.kind !== "relative") return contrast.difference;
  return "absent" in contrast.relative ? { low: null, high: null } : contrast.relative;
}

function above(end: number | null, limit: number): boolean {
  return end !== null && end > limit;
}
function below(end: number | null, limit: number): boolean {
  return end !== null && end < limit;
}
