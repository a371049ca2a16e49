import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { deciding } from "./deciding.ts";
import { metricOf } from "./measure.ts";
import type { Effect } from "./types.ts";
import { type Ends, ruleOf, turned } from "./zones.ts";

/** What the conclusion on an effect hangs on; signs turned so that more is better. */
export interface Hinge {
  /** The end of the interval that has passed the limit. */
  readonly end: "low" | "high";
  /** In the unit of the interval that is held against the rule. */
  readonly limit: number;
  /** How far that end lies beyond it, in the metric's unit. */
  readonly distance: number;
}

/** Units of one variant that were enrolled and are not among those compared, by why. */
export interface NotCounted {
  readonly lateFollowUp: number;
  readonly inTwoVariants: number;
  readonly withoutValue: number;
}

/** How the units that were not counted would have to be for the conclusion on an effect to turn. */
export interface TippingPoint {
  readonly notCounted: NotCounted;
  readonly units: number;
  /** Level of the variant's counted units, and what that of its others would have to be. */
  readonly counted: number;
  readonly needed: number;
  /** Whether any units could have such a level: a share within 0 and 1, no level under 0 of what is never under 0. */
  readonly isPossible: boolean;
}

/**
 * The limit that an effect has passed for good: what it is held to by the plan's rule, whichever way it went.
 * @returns null where the effect is for information or not settled, so that there is nothing to turn
 */
export function hingeOf(effect: Effect, plan: Plan): Hinge | null {
  const metric = metricOf(effect, plan);
  const rule = ruleOf(metric);
  const { difference, relative, control } = deciding(effect);
  const place = placeOf(effect, plan, rule?.value ?? 0);
  if (place === null) return null;
  const isRelative = rule?.kind === "relative";
  if (isRelative && ("absent" in relative || control.mean === null)) return null;
  const held: Ends = isRelative && !("absent" in relative) ? relative : difference;
  const end = turned(metric, held)[place.end];
  if (end === null) return null;
  const distance = Math.abs(end - place.limit) * (isRelative ? (control.mean ?? 0) : 1);
  return { ...place, distance };
}

function placeOf({ role, zone }: Effect, { decision }: Plan, size: number): Pick<Hinge, "end" | "limit"> | null {
  switch (zone) {
    case "worthwhile":
      return { end: "low", limit: decision.adoptWhen === "shown-worthwhile" ? size : 0 };
    case "better":
      return role === "primary" && decision.adoptWhen === "shown-better" ? { end: "low", limit: 0 } : null;
    case "worse":
      return role === "primary" ? { end: "high", limit: 0 } : null;
    case "too-small":
    case "no-worthwhile-gain":
      return { end: "high", limit: size };
    case "within":
      return { end: "low", limit: -size };
    case "beyond":
      return { end: "high", limit: -size };
    case "not-settled":
      return null;
    default:
      return unknown(zone);
  }
}

/**
 * Tipping point of the units of the variant that were not counted, those of the control taken to be like its counted ones:
 *
 *   level = mean_t -+ distance (n + m) / m,   n counted, m not counted
 * for then the difference over all enrolled ends at the limit, the interval as wide as it is.
 * @returns null where nothing is to be turned, or every enrolled unit was counted
 *
 * Source: ICH E9(R1), sensitivity analysis; Campbell, Pennello and Yue 2011, Journal of Biopharmaceutical Statistics 21,
 * 180-195, tipping point.
 */
export function tippingPoint(effect: Effect, plan: Plan, reduction: Reduction): TippingPoint | null {
  const hinge = hingeOf(effect, plan);
  const { variant } = deciding(effect);
  const notCounted = notCountedOf(effect, plan, reduction);
  const units = notCounted.lateFollowUp + notCounted.inTwoVariants + notCounted.withoutValue;
  if (hinge === null || units === 0 || variant.mean === null || effect.summary === "quantile") return null;
  const metric = metricOf(effect, plan);
  const towards = (hinge.end === "low" ? -1 : 1) * (metric.goodIs === "higher" ? 1 : -1);
  const needed = variant.mean + (towards * hinge.distance * (variant.units + units)) / units;
  const isShare = effect.summary === "proportion";
  const neverUnder =
    isShare || [effect.contrast.control, effect.contrast.variant].every(({ smallest }) => (smallest ?? 0) >= 0);
  return {
    notCounted,
    units,
    counted: variant.mean,
    needed,
    isPossible: (!neverUnder || needed >= 0) && (!isShare || needed <= 1),
  };
}

export function notCountedOf(effect: Effect, plan: Plan, { unitLines, metrics }: Reduction): NotCounted {
  const v = plan.variants.findIndex(({ name }) => name === effect.variant);
  const onLine = (id: string) => unitLines.find((line) => line.id === id)?.byVariant?.[v] ?? 0;
  const cells = metrics.find(({ metric }) => metric === effect.metric);
  return {
    lateFollowUp: onLine("follow-up"),
    inTwoVariants: onLine("switched"),
    withoutValue: cells?.leftOut[v] ?? 0,
  };
}

function unknown(zone: never): never {
  throw new Error(`no limit for the zone ${String(zone)}`);
}
