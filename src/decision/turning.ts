import type { Reduction } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import {
  alike,
  count,
  endInWords,
  estimateInWords,
  type Interval,
  intervalInWords,
  list,
  MORE,
  plain,
  plural,
  quoted,
  rates,
} from "../words/index.ts";
import { deciding } from "./deciding.ts";
import { counts, measure, metricOf } from "./measure.ts";
import { type NotCounted, type TippingPoint, tippingPoint } from "./tipping.ts";
import { intervalLabel } from "./told.ts";
import type { Effect } from "./types.ts";
import { turned } from "./zones.ts";

/** One line of the table of what would change the conclusion on an effect, and what it amounts to. */
export interface Turn {
  readonly what: string;
  readonly answer: string;
}

/** What would change the conclusion on an effect, and what the effect amounts to; in the reader's words. */
export function whatWouldChange(effect: Effect, plan: Plan, reduction: Reduction): Turn[] {
  return [
    ...limits(effect, plan),
    ...tipping(effect, plan, reduction),
    ...amounts(effect, plan),
    ...zeros(effect, plan, reduction),
  ];
}

/** The plan's amount at which the zone would be another. */
function limits(effect: Effect, plan: Plan): Turn[] {
  const metric = metricOf(effect, plan);
  const { interval, scale, words, marks } = measure(effect, plan);
  if (interval === null || effect.role === "secondary") return [];
  const { low, high } = turned(metric, interval);
  const [harm, gain] = metric.goodIs === "higher" ? (["low", "high"] as const) : (["high", "low"] as const);
  const text = (end: "low" | "high") => endInWords(interval, end, scale, words, marks) ?? "";
  if (effect.role === "guardrail") {
    return [
      {
        what: "Tightest limit that would still be kept",
        answer:
          low === null
            ? "none: the interval has no end on the worse side"
            : low >= 0
              ? "any, for the interval holds no harm"
              : `any limit beyond ${text(harm)}`,
      },
    ];
  }
  const shown = {
    what: "Largest worthwhile effect that would still count as shown",
    answer: low !== null && low > 0 ? `anything short of ${text(harm)}` : "none, for the interval does not exclude 0",
  };
  const ruledOut = {
    what: "Smallest worthwhile effect that is ruled out",
    answer:
      high === null
        ? "none: the interval has no end on the better side"
        : high <= 0
          ? "any gain"
          : `anything beyond ${text(gain)}`,
  };
  return [shown, ruledOut];
}

function tipping(effect: Effect, plan: Plan, reduction: Reduction): Turn[] {
  const found = tippingPoint(effect, plan, reduction);
  if (found === null) return [];
  const metric = metricOf(effect, plan);
  const { one, many } = plan.unitCalled;
  const who = `the ${plural(found.units, one, many)} with ${quoted(effect.variant)} ${whyNotCounted(found.notCounted)}`;
  const like = `those with ${quoted(effect.control)} like its counted ones, the interval as wide as it is`;
  return [
    {
      what: `What ${many} not counted would have to be for this to turn`,
      answer: found.isPossible
        ? `${who} would have to stand at about ${levelText(found, metric, plan)} (${like})`
        : `nothing they could be: ${who} cannot turn it (${like})`,
    },
  ];
}

function whyNotCounted({ lateFollowUp, inTwoVariants, withoutValue }: NotCounted): string {
  const reasons = [
    ...(lateFollowUp > 0 ? ["not followed to the end"] : []),
    ...(inTwoVariants > 0 ? ["seen with two variants"] : []),
    ...(withoutValue > 0 ? ["without a value"] : []),
  ];
  return list(reasons, "or");
}

/** "7.4 instead of 13.2 of 100 visitors", "14.4 instead of 8.0 per 100 visitors", "61.2 kr instead of 104 kr". */
function levelText({ counted, needed }: TippingPoint, metric: Metric, plan: Plan): string {
  const isShare = metric.summary === "proportion";
  if (isShare || (counts(metric) && metric.unitOfMeasure === null && Math.max(needed, counted) <= 1)) {
    const { of, texts } = rates([needed, counted]);
    return `${texts[0] ?? ""} instead of ${texts[1] ?? ""} ${isShare ? "of" : "per"} ${of} ${plan.unitCalled.many}`;
  }
  const unit = metric.unitOfMeasure === null ? "" : ` ${metric.unitOfMeasure}`;
  const text = (level: number) => plain(Number(level.toPrecision(3))) + unit;
  return `${text(needed)} instead of ${text(counted)}`;
}

const THOUSAND = 1_000;

/** Absolute amounts: for every 1,000 units, and in a month of the plan's forecast. Of shares and means only. */
function amounts(effect: Effect, plan: Plan): Turn[] {
  const metric = metricOf(effect, plan);
  const { estimate, low, high } = deciding(effect).difference;
  if (estimate === null || (metric.summary !== "proportion" && metric.summary !== "mean")) return [];
  const { many } = plan.unitCalled;
  const some = metric.withoutRows === "leave-out" ? `${many} with a value` : many;
  const instead = `with ${quoted(effect.variant)} instead of ${quoted(effect.control)}`;
  const month = metric.withoutRows === "leave-out" ? null : (plan.forecast?.unitsPerMonth ?? null);
  return [
    {
      what: `For every ${count(THOUSAND)} ${some} ${instead}`,
      answer: amountText(metric, plan, { estimate, low, high }, THOUSAND),
    },
    ...(month === null
      ? []
      : [
          {
            what: `In a month of ${count(month)} ${many}, all ${instead}`,
            answer: amountText(metric, plan, { estimate, low, high }, month),
          },
        ]),
  ];
}

function amountText(metric: Metric, plan: Plan, { estimate, low, high }: Interval, units: number): string {
  const half = Math.max(...[low, high].map((end) => Math.abs((end ?? estimate) - estimate))) * units;
  // Two digits of half the width count, as everywhere; of hundreds and more they stand before the point.
  const step = 10 ** Math.max(0, Math.floor(Math.log10(half)) - 1);
  const times = (end: number) => Math.round((end * units) / step) * step;
  const isWide = half >= 2;
  const ends = (end: number | null) => (end === null ? null : isWide ? times(end) : end * units);
  const interval: Interval = { estimate: ends(estimate) ?? 0, low: ends(low), high: ends(high) };
  const unit = metric.summary === "proportion" ? null : metric.unitOfMeasure;
  const scale = { kind: "amount", unit, ...(isWide ? { places: 0 } : {}) } as const;
  const words = counts(metric) ? MORE : { above: "more", below: "less" };
  return `${estimateInWords(interval, scale, words)} (${intervalLabel(plan)}: ${intervalInWords(interval, scale, words)})`;
}

/** At least so many zeros in an arm for a mean to be taken apart. */
const MANY_ZEROS = 0.1;

/** A mean of which many values are 0: how many units have any, and the mean of those that have. */
function zeros(effect: Effect, plan: Plan, { metrics }: Reduction): Turn[] {
  const cells = metrics.find(({ metric }) => metric === effect.metric);
  if (effect.summary !== "mean" || cells === undefined) return [];
  const arms = ([effect.variant, effect.control] as const).map((name, i) => {
    const v = plan.variants.findIndex((variant) => variant.name === name);
    const { units, total } = i === 0 ? effect.contrast.variant : effect.contrast.control;
    const some = cells.notZero[v] ?? 0;
    return { share: units === 0 ? 0 : some / units, mean: some === 0 || total === null ? null : total / some };
  });
  const means = arms.flatMap(({ mean }) => (mean === null ? [] : [mean]));
  if (means.length < 2 || arms.every(({ share }) => share > 1 - MANY_ZEROS)) return [];
  const { of, texts } = rates(arms.map(({ share }) => share));
  const [ofVariant = "", ofControl = ""] = alike(means.map((mean) => Number(mean.toPrecision(5))));
  const { one, many } = plan.unitCalled;
  const unit = metricOf(effect, plan).unitOfMeasure;
  const each = unit === null ? "" : ` ${unit}`;
  return [
    {
      what: `Share with any, and mean of those that have any`,
      answer: `${texts[0] ?? ""} of ${of} ${many} with ${quoted(effect.variant)} and ${texts[1] ?? ""} with ${quoted(effect.control)} have any; a ${one} that has any has ${ofVariant}${each} and ${ofControl}${each} on average. The second is no randomised comparison: the variant can change who is among those.`,
    },
  ];
}
