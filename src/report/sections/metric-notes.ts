import { because, deciding, type Effect } from "../../decision/index.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Metric, Plan } from "../../plan/types.ts";
import { count, plain, plural, quoted } from "../../words/index.ts";
import { adjustedNotes } from "./adjusted.ts";

/** What the reader must know to take the figures as they are meant. */
export function metricNotes(metric: Metric, plan: Plan, reduction: Reduction, effects: readonly Effect[]): string[] {
  const cells = reduction.metrics.find((candidate) => candidate.metric === metric.name);
  if (cells === undefined) throw new Error(`the reduction has no cells of the metric "${metric.name}"`);
  const { one, many } = plan.unitCalled;
  const total = (counts: readonly number[]) => counts.reduce((a, b) => a + b, 0);
  const notes: string[] = [];
  if (cells.cap !== null) {
    const unit = metric.unitOfMeasure === null ? "" : ` ${metric.unitOfMeasure}`;
    const changed = plan.variants
      .map(({ name }, v) => `${count(cells.cap?.units[v] ?? 0)} with ${quoted(name)}`)
      .join(", ");
    notes.push(
      `The cap stands at ${plain(Number(cells.cap.value))}${unit}; it changed ${plural(total(cells.cap.units), one, many)}: ${changed}.`,
    );
  }
  if (total(cells.leftOut) > 0) {
    const by = plan.variants.map(({ name }, v) => `${count(cells.leftOut[v] ?? 0)} with ${quoted(name)}`).join(", ");
    notes.push(`${plural(total(cells.leftOut), one, many)} without a value left out: ${by}.`);
  }
  if (cells.countedWithoutNumber > 0) {
    notes.push(
      `${plural(cells.countedWithoutNumber, "counted row", "counted rows")} held no number and added nothing.`,
    );
  }
  notes.push(...adjustedNotes(metric, plan, effects));
  for (const effect of effects) {
    const absent = absentText(effect, plan);
    if (absent !== null && !notes.includes(absent)) notes.push(absent);
  }
  return notes;
}

/** Why a figure does not exist, as a sentence. */
function absentText(effect: Effect, plan: Plan): string | null {
  const contrast = deciding(effect);
  const { control } = effect;
  const { one, many } = plan.unitCalled;
  const { low, high } = contrast.difference;
  if (contrast.why !== null) return `There is no interval, since ${because(contrast.why.absent, one, many)}.`;
  if (contrast.difference.method === "quantile" && (low === null || high === null)) {
    return `One end of the interval is open, since ${because("few-for-rank", one, many)}.`;
  }
  if (!("absent" in contrast.relative)) return null;
  return `The difference relative to ${quoted(control)} is not shown, since ${because(contrast.relative.absent, one, many)}.`;
}
