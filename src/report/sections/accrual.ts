import {
  type Accrual,
  type AccrualDay,
  absolute,
  type Effect,
  metricOf,
  UNITS_FOR_ACCRUAL,
} from "../../decision/index.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Metric, Plan } from "../../plan/types.ts";
import { count, intervalInWords, planPercent, quoted } from "../../words/index.ts";
import { accrual as accrualChart } from "../charts/accrual.ts";
import { type Drawing, draw } from "../charts/draw.ts";
import { axisLabel, figures, scaleText } from "../figure-words.ts";
import {
  drawnMarks,
  type IncidentMark,
  incidentMarks,
  lettersOn,
  marksInWords,
  marksReading,
  namesOf,
} from "./accrual-marks.ts";
import { dayText, weekdaysSentence } from "./weekdays.ts";

/** How one effect came about as units enrolled: words, a drawing where the measure decides, and the numbers in a table. */
export interface AccrualPart {
  readonly id: string;
  readonly title: string;
  readonly sentences: readonly string[];
  readonly drawing: { readonly drawing: Drawing; readonly caption: string; readonly reading: string } | null;
  readonly caption: string;
  /** Of the table's first column. */
  readonly head: string;
  readonly columns: readonly string[];
  readonly rows: readonly { readonly day: string; readonly cells: readonly string[] }[];
}

/** By metric, one part an effect that has an accrual; the first of all says which weekdays were covered. */
export async function accrualParts(
  plan: Plan,
  effects: readonly Effect[],
  accruals: readonly Accrual[],
  reduction: Reduction,
): Promise<Map<string, AccrualPart[]>> {
  const since = reduction.facts.analysedByDay[0]?.day;
  const found = new Map<string, AccrualPart[]>(plan.metrics.map(({ name }) => [name, []]));
  for (const [i, accrual] of accruals.entries()) {
    const effect = effects.find(({ metric, variant }) => metric === accrual.metric && variant === accrual.variant);
    if (effect === undefined)
      throw new Error(`an accrual of ${accrual.metric} and ${accrual.variant} without an effect`);
    const part = await partOf(plan, effect, accrual, since, `accrual-${i + 1}`);
    const weekdays = i === 0 ? [weekdaysSentence(plan, reduction)] : [];
    found.get(accrual.metric)?.push({ ...part, sentences: [...weekdays, ...part.sentences] });
  }
  return found;
}

async function partOf(
  plan: Plan,
  effect: Effect,
  accrual: Accrual,
  since: number | undefined,
  id: string,
): Promise<AccrualPart> {
  const { many } = plan.unitCalled;
  const metric = metricOf(effect, plan);
  const shown = accrual.days;
  const what = scaleText(absolute(effect, metric).scale).replace("Difference", "difference");
  const marks = shown.length === 0 ? [] : incidentMarks(plan, shown, since);
  const isMarked = shown.some(({ day }) => lettersOn(marks, day) !== "");
  const isDrawn = effect.role !== "secondary" && shown.length >= 2;
  const caption = `${effect.metric}, ${quoted(effect.variant)} against ${quoted(effect.control)}: ${what}, as ${many} enrolled`;
  return {
    id,
    title: `${quoted(effect.variant)} against ${quoted(effect.control)}: as ${many} enrolled`,
    sentences: [
      ...(shown.length === 0 ? [notShown(plan)] : sentences(plan, effect, metric, accrual)),
      ...(isDrawn || !isMarked ? [] : [namesOf(marks)]),
    ],
    drawing: isDrawn
      ? {
          caption,
          reading: `${READING}${marksReading(marks, plan)}`,
          drawing: await drawn(plan, effect, metric, shown, marks, caption, id),
        }
      : null,
    caption,
    head: "up to",
    columns: [
      `${many} so far`,
      "difference",
      "low",
      "high",
      "band, low",
      "band, high",
      ...(isMarked ? ["incident"] : []),
    ],
    rows: shown.map(({ day, units, estimate, low, high, bandLow, bandHigh }) => ({
      day: dayText(day),
      cells: [
        count(units),
        ...figures([estimate, low, high, bandLow, bandHigh]),
        ...(isMarked ? [lettersOn(marks, day)] : []),
      ],
    })),
  };
}

const READING =
  "Line with squares: the difference among all enrolled up to a day, each with the whole follow-up. Dashed: the interval of that day alone. Shaded: the band that holds on all days together. Level line: zero, where the groups do not differ.";

async function drawn(
  plan: Plan,
  effect: Effect,
  metric: Metric,
  days: readonly AccrualDay[],
  marks: readonly IncidentMark[],
  title: string,
  id: string,
): Promise<Drawing> {
  const { scale } = absolute(effect, metric);
  const points = days.flatMap(({ estimate, ...day }) => (estimate === null ? [] : [{ ...day, estimate }]));
  const words = {
    xTitle: `${plan.unitCalled.many} enrolled and counted`,
    xLabel: count,
    yLabel: (value: number) => axisLabel(value, scale),
  };
  const spec = accrualChart(points, words, drawnMarks(marks, days));
  const last = days.at(-1);
  const description = `${scaleText(scale)}, against the number of ${plan.unitCalled.many}, on ${days.length} days. ${atTheEnd(effect, metric, last, plan)}${marksInWords(marks, plan)}`;
  return draw(spec, `${id}-drawing`, { title, description });
}

function sentences(plan: Plan, effect: Effect, metric: Metric, accrual: Accrual): string[] {
  const { many } = plan.unitCalled;
  const confidence = planPercent(plan.decision.confidence);
  const { band, days } = accrual;
  const planned = band.isPlanned
    ? `${count(band.planned)} ${many}, as many as were planned${plan.variants.length > 2 ? " in these two groups" : ""}`
    : `${count(band.planned)} ${many}, as many as came, for the plan does not say how many were to come`;
  const [first] = days;
  return [
    first === undefined
      ? ""
      : `Shown from ${dayText(first.day)} on, when each group had ${UNITS_FOR_ACCRUAL} ${many} and no tail of the normal curve was off by more than half.`,
    `The band holds the truth on all days at once with ${confidence} confidence, so it may be read on any day and as often as one likes; the interval of one day may not. It is narrowest at ${planned}.`,
    atTheEnd(effect, metric, days.at(-1), plan),
    clearFrom(days),
  ].filter((sentence) => sentence !== "");
}

function atTheEnd(effect: Effect, metric: Metric, last: AccrualDay | undefined, plan: Plan): string {
  if (last === undefined || last.estimate === null) return "";
  const { scale, words } = absolute(effect, metric);
  const write = (low: number | null, high: number | null) =>
    intervalInWords({ estimate: last.estimate ?? 0, low, high }, scale, words);
  const confidence = planPercent(plan.decision.confidence);
  return `At the end the interval of that day alone is ${write(last.low, last.high)}, the band ${write(last.bandLow, last.bandHigh)} (both ${confidence}).`;
}

/** From which day on the band lies on one side of zero, to the end. */
function clearFrom(days: readonly AccrualDay[]): string {
  const side = ({ bandLow, bandHigh }: AccrualDay) =>
    bandLow !== null && bandLow > 0 ? "above" : bandHigh !== null && bandHigh < 0 ? "below" : null;
  const last = days.at(-1);
  const now = last === undefined ? null : side(last);
  if (now !== null) {
    const first = days[days.findLastIndex((day) => side(day) !== now) + 1];
    const since = first === undefined || first === last ? "On the last day" : `From ${dayText(first.day)} to the end`;
    return `${since} the whole band lies ${now} zero.`;
  }
  return days.some((day) => side(day) !== null)
    ? "On some days the whole band lay on one side of zero; at the end zero lies within it."
    : "Zero lies within the band on every day shown.";
}

function notShown(plan: Plan): string {
  const { many } = plan.unitCalled;
  return `How the difference came about as ${many} enrolled is not shown: on no day did each group have ${UNITS_FOR_ACCRUAL} ${many} and both tails of the normal curve within half of what they should be.`;
}
