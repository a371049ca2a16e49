import type { Plan } from "../plan/types.ts";
import {
  endInWords,
  estimateInWords,
  estimateSize,
  intervalInWords,
  intervalSizes,
  planPercent,
  quoted,
} from "../words/index.ts";
import { because } from "./absent.ts";
import { deciding } from "./deciding.ts";
import { amountText, measure, metricOf, ruleInWords } from "./measure.ts";
import type { Effect } from "./types.ts";
import { ruleOf } from "./zones.ts";

/** The texts of one effect that has an interval, ready to stand in any sentence. */
export interface Told {
  readonly metric: string;
  readonly variant: string;
  /** "10.0% more (95% interval: 6.5% to 13.7% more)". */
  readonly found: string;
  /** 'rose by 10.0% with "calendar" (95% interval: 6.5% to 13.7%)'. */
  readonly moved: string;
  /** "95% interval: 6.5% to 13.7% more". */
  readonly interval: string;
  /** The end nearer to harm, and the one nearer to gain, in words; "" where it is unbounded. */
  readonly least: string;
  readonly most: string;
  /** "5%" and "5% more"; "" where the plan states no amount. */
  readonly amount: string;
  readonly rule: string;
}

/** Null where no interval exists: `unmeasured` then says why. */
export function told(effect: Effect, plan: Plan): Told | null {
  const { interval, scale, words, marks } = measure(effect, plan);
  if (interval === null || (interval.low === null && interval.high === null)) return null;
  const metric = metricOf(effect, plan);
  const rule = ruleOf(metric);
  const [harmEnd, gainEnd] = metric.goodIs === "higher" ? (["low", "high"] as const) : (["high", "low"] as const);
  const label = intervalLabel(plan);
  const ends = `${label}: ${intervalInWords(interval, scale, words, marks)}`;
  const sizes = intervalSizes(interval, scale, marks);
  return {
    metric: effect.metric,
    variant: quoted(effect.variant),
    found: `${estimateInWords(interval, scale, words, marks)} (${ends})`,
    moved: `${movedBy(interval.estimate, estimateSize(interval, scale, marks))} with ${quoted(effect.variant)} (${sizes === null ? ends : `${label}: ${sizes}`})`,
    interval: ends,
    least: endInWords(interval, harmEnd, scale, words, marks) ?? "",
    most: endInWords(interval, gainEnd, scale, words, marks) ?? "",
    amount: rule === null ? "" : amountText(metric, rule),
    rule: rule === null ? "" : ruleInWords(metric, rule),
  };
}

function movedBy(estimate: number, size: string): string {
  if (estimate === 0) return "did not move";
  return `${estimate > 0 ? "rose" : "fell"} by ${size}`;
}

/** "95% interval". */
export function intervalLabel(plan: Plan): string {
  return `${planPercent(plan.decision.confidence)} interval`;
}

/** Why there is no interval, or none that the rule can be held against; null where there is. To follow "since". */
export function unmeasured(effect: Effect, plan: Plan): string | null {
  const { one, many } = plan.unitCalled;
  const { difference, relative, why } = deciding(effect);
  if (difference.estimate === null || (difference.low === null && difference.high === null)) {
    return because(why?.absent ?? "not-built", one, many);
  }
  if (ruleOf(metricOf(effect, plan))?.kind === "relative" && "absent" in relative) {
    return because(relative.absent, one, many);
  }
  return null;
}
