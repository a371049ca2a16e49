import { absolute, type DaysSince, deciding, type Effect, metricOf } from "../../decision/index.ts";
import type { Metric, Plan } from "../../plan/types.ts";
import { count, estimateInWords, intervalInWords, planPercent, plural, pText, quoted } from "../../words/index.ts";
import { days as daysChart } from "../charts/days.ts";
import { type Drawing, draw } from "../charts/draw.ts";
import { sideBySide } from "../effect-text.ts";
import { axisLabel, figures, scaleText } from "../figure-words.ts";
import type { AccrualPart } from "./accrual.ts";

/** By metric, one part an effect that can be told by day since enrolment; of the same shape as those of the accrual. */
export async function dayParts(
  plan: Plan,
  effects: readonly Effect[],
  found: readonly DaysSince[],
): Promise<Map<string, AccrualPart[]>> {
  const parts = new Map<string, AccrualPart[]>(plan.metrics.map(({ name }) => [name, []]));
  for (const [i, one] of found.entries()) {
    const effect = effects.find(({ metric, variant }) => metric === one.metric && variant === one.variant);
    if (effect === undefined) throw new Error(`days of ${one.metric} and ${one.variant} without an effect`);
    parts.get(one.metric)?.push(await partOf(plan, effect, one, `days-${i + 1}`));
  }
  return parts;
}

async function partOf(plan: Plan, effect: Effect, found: DaysSince, id: string): Promise<AccrualPart> {
  const metric = metricOf(effect, plan);
  const what = scaleText(absolute(effect, metric).scale).replace("Difference", "difference");
  const caption = `${effect.metric}, ${quoted(effect.variant)} against ${quoted(effect.control)}: ${what}, by day since enrolment`;
  return {
    id,
    title: `${quoted(effect.variant)} against ${quoted(effect.control)}: by day since enrolment`,
    sentences: sentences(plan, effect, metric, found),
    drawing: { caption, reading: READING, drawing: await drawn(plan, effect, metric, found, caption, id) },
    caption,
    head: "day",
    columns: [effect.variant, effect.control, "difference", "low", "high", "p"],
    rows: found.days.map(({ control, variant, difference }, day) => ({
      day: String(day),
      cells: [
        ...sideBySide([variant.mean, control.mean]),
        ...figures([difference.estimate, difference.low, difference.high, difference.p]),
      ],
    })),
  };
}

const READING =
  "Square: the difference in what happened on that day of 24 hours after enrolment, day 0 the first. Upright: its interval, of that day alone. Level line: zero, where the groups do not differ.";

async function drawn(
  plan: Plan,
  effect: Effect,
  metric: Metric,
  found: DaysSince,
  title: string,
  id: string,
): Promise<Drawing> {
  const { scale } = absolute(effect, metric);
  const points = found.days.flatMap(({ difference: { estimate, low, high } }, day) =>
    estimate === null ? [] : [{ day, estimate, low, high }],
  );
  const spec = daysChart(points.length === 0 ? [{ day: 0, estimate: 0, low: null, high: null }] : points, {
    xTitle: "days since enrolment",
    xLabel: count,
    yLabel: (value) => axisLabel(value, scale),
  });
  const description = `${scaleText(scale)} on each of ${found.days.length} days since enrolment. ${trendSentence(plan, effect, metric, found)}`;
  return draw(spec, `${id}-drawing`, { title, description });
}

function sentences(plan: Plan, effect: Effect, metric: Metric, found: DaysSince): string[] {
  const { one, many } = plan.unitCalled;
  const { control, variant } = found.units;
  const whole = plan.followUp === null ? 0 : plan.followUp.days - found.days.length;
  return [
    `Counted are the ${plural(control + variant, one, many)} that were followed to the end, each on each of ${found.days.length} days of 24 hours${dayValue(metric)}.`,
    ...(whole > 0 ? ["What came after the last whole day of the follow-up is left out here."] : []),
    ...(effect.adjusted === null ? [] : ["These figures are not adjusted for anything."]),
    trendSentence(plan, effect, metric, found),
    "Each interval is of its own day alone. Where less happens on a day, differences are smaller too: the levels stand in the table.",
  ];
}

/** What a day's figure is, where it is not plain. */
function dayValue(metric: Metric): string {
  if (metric.summary === "proportion") return ": the share with at least one such row on that day";
  if (metric.of.aggregate.kind === "days") return ": with a row on that day or not";
  return metric.cap === null ? "" : "; under the cap a day counts what it adds to the capped value";
}

function trendSentence(plan: Plan, effect: Effect, metric: Metric, { trend }: DaysSince): string {
  const { estimate, low, high, p } = trend;
  if (estimate === null || low === null || high === null || p === null) {
    return "Whether the difference changes over the days cannot be told.";
  }
  const { scale, words } = absolute(effect, metric);
  const interval = { estimate, low, high };
  const label = `${planPercent(plan.decision.confidence)} interval`;
  const figuresText = `${estimateInWords(interval, scale, words)} from one day to the next, ${label} ${intervalInWords(interval, scale, words)}, ${pText(p)}`;
  if (p >= 1 - plan.decision.confidence)
    return `Over the days the difference changes by no more than chance explains (${figuresText}).`;
  const whole = deciding(effect).difference.estimate ?? 0;
  const way = whole === 0 ? "changes" : whole > 0 === estimate > 0 ? "grows" : "shrinks or turns";
  return `Over the days the difference ${way} by more than chance explains (${figuresText}).`;
}
