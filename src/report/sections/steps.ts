import type { Plan } from "../../plan/index.ts";
import { capital, count, list, quoted } from "../../words/index.ts";
import type { ChangesJson, StepEffect, StepJson, StepsJson } from "../changes/types.ts";
import { conclusionText, isOtherConclusion, nameOf, shownTexts } from "../changes/words.ts";
import { NONE } from "../effect-text.ts";

/** Which change did it: each alone, and one added to the other. */
export interface StepsTable {
  readonly caption: string;
  readonly columns: readonly string[];
  readonly rows: readonly { readonly change: string; readonly how: string; readonly cells: readonly string[] }[];
  readonly sentences: readonly string[];
}

export function stepsTable({ steps, log }: ChangesJson, plan: Plan): StepsTable | null {
  if (steps === null) return null;
  const keys = shownEffects(steps, plan);
  const cells = (step: StepJson | null) => [
    ...keys.map((key) => estimateText(step, key, plan)),
    step === null ? NONE : count(Object.values(step.analysed).reduce((sum, n) => sum + n, 0)),
    step === null ? "no plan by itself" : conclusionText(step, plan),
  ];
  /** What a step leaves as it was needs no reading. */
  const against = (step: StepJson | null, before: StepJson | null) =>
    step === null || before === null
      ? cells(step)
      : cells(step).map((cell, i) => (cell === cells(before)[i] ? "as before" : cell));
  return {
    caption: "Each change alone, and one added to the other in the order of the plan",
    columns: [...keys.map((key) => nameOf(key, plan)), "counted", "conclusion"],
    rows: [
      {
        change: log.length > 0 ? "The earlier plan on this log" : "The earlier report",
        how: "start",
        cells: cells(steps.start),
      },
      ...steps.changes.flatMap(({ change, alone, added }, i) => [
        { change, how: "alone", cells: against(alone, steps.start) },
        // the first one added is the first one alone
        ...(i === 0
          ? []
          : [{ change, how: "added to those above", cells: against(added, steps.changes[i - 1]?.added ?? null) }]),
      ]),
    ],
    sentences: [...movedSentences(steps, plan), ...stepSentences(steps)],
  };
}

type Key = Pick<StepEffect, "metric" | "variant">;

/** What decides, and of the rest what some step moved. */
function shownEffects(steps: StepsJson, plan: Plan): Key[] {
  const all = [steps.start, ...steps.changes.flatMap(({ alone, added }) => [alone, added])];
  const keys = new Map(all.flatMap((step) => step?.effects ?? []).map((effect) => [nameOf(effect, plan), effect]));
  return [...keys.values()].filter(
    (key) =>
      plan.metrics.find(({ name }) => name === key.metric)?.role !== "secondary" ||
      all.some((step) => step !== null && hasMoved(steps.start, step, key)),
  );
}

/** By more than the last digit of what the log's sums carry. */
function hasMoved(before: StepJson, after: StepJson, key: Key): boolean {
  const [was, is] = [effectOf(before, key), effectOf(after, key)];
  if (was === undefined || is === undefined) return was !== is;
  return ([was.estimate, was.low, was.high] as const).some((end, i) => !same(end, [is.estimate, is.low, is.high][i]));
}

function same(a: number | null, b: number | null | undefined): boolean {
  if (a === null || b == null) return a === (b ?? null);
  return Math.abs(a - b) <= 1e-9 * Math.max(Math.abs(a), Math.abs(b));
}

function effectOf(step: StepJson, key: Key): StepEffect | undefined {
  return step.effects.find(({ metric, variant }) => metric === key.metric && variant === key.variant);
}

/** 'The estimates were moved by "filters, staff accounts: added" (Booked and Support contacts).' */
function movedSentences(steps: StepsJson, plan: Plan): string[] {
  const keys = shownEffects(steps, plan);
  const moving = steps.changes.flatMap(({ change, alone }) => {
    const moved = alone === null ? [] : keys.filter((key) => hasMoved(steps.start, alone, key));
    return moved.length === 0 ? [] : [`${quoted(change)} (${list(moved.map((key) => nameOf(key, plan)))})`];
  });
  return moving.length === 0 ? ["No change alone moves an estimate."] : [`Estimates are moved by ${list(moving)}.`];
}

function estimateText(step: StepJson | null, key: Key, plan: Plan): string {
  const found = step === null ? undefined : effectOf(step, key);
  if (found === undefined) return NONE;
  const metric = plan.metrics.find(({ name }) => name === key.metric) ?? null;
  const own = {
    ...found,
    zone: "not-settled",
    units: { control: 0, variant: 0 },
    totals: { control: null, variant: null },
  } as const;
  const { after } = shownTexts({ before: null, after: own }, metric);
  return `${after.estimate} (${after.interval})`;
}

/** Which change moved the conclusion, and which moved an estimate most. */
export function stepSentences({ start, changes }: StepsJson): string[] {
  const turning = changes.filter(({ alone }) => alone !== null && isOtherConclusion(start, alone));
  const inOrder = changes.find(({ added }, i) => {
    const before = i === 0 ? start : (changes[i - 1]?.added ?? null);
    return added !== null && before !== null && isOtherConclusion(before, added);
  });
  const names = (of: StepsJson["changes"]) => list(of.map(({ change }) => quoted(change)));
  if (turning.length === 0 && inOrder === undefined)
    return ["No change moves the conclusion, alone or with the others."];
  if (turning.length === 0 && inOrder !== undefined) {
    return [`No change alone moves the conclusion; with those before it, ${quoted(inOrder.change)} does.`];
  }
  const [only] = turning;
  const alone =
    turning.length === 1 && only !== undefined
      ? `Of the changes only ${quoted(only.change)} moves the conclusion by itself.`
      : `Each of these moves the conclusion by itself: ${names(turning)}.`;
  const together = inOrder === undefined ? " All together leave it as it was." : "";
  return [capital(alone) + together];
}
