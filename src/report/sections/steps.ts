import type { Plan } from "../../plan/index.ts";
import { capital, count, list, quoted } from "../../words/index.ts";
import type { ChangesJson, StepJson, StepsJson } from "../changes/types.ts";
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
  const shown = steps.start.effects
    .concat(...steps.changes.flatMap(({ added }) => (added === null ? [] : [added.effects])))
    .filter(({ metric }) => plan.metrics.find(({ name }) => name === metric)?.role !== "secondary");
  const keys = [...new Map(shown.map((effect) => [nameOf(effect, plan), effect])).values()];
  const cells = (step: StepJson | null) => [
    ...keys.map((key) => estimateText(step, key, plan)),
    step === null ? NONE : count(Object.values(step.analysed).reduce((sum, n) => sum + n, 0)),
    step === null ? "no plan by itself" : conclusionText(step, plan),
  ];
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
        { change, how: "alone", cells: cells(alone) },
        // the first one added is the first one alone
        ...(i === 0 ? [] : [{ change, how: "added to those above", cells: cells(added) }]),
      ]),
    ],
    sentences: stepSentences(steps),
  };
}

function estimateText(step: StepJson | null, key: { metric: string; variant: string }, plan: Plan): string {
  const found = step?.effects.find(({ metric, variant }) => metric === key.metric && variant === key.variant);
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
