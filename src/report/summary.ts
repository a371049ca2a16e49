import { lookSentences, nextSentences, untilThen, whyNotSettled } from "../decision/index.ts";
import type { ChangesJson } from "./changes/types.ts";
import { saidBefore, whatChanged } from "./changes/words.ts";
import { directed, namesToIsolate } from "./direction.ts";
import { whenText } from "./plan-words.ts";
import { answers, findings } from "./sections/decision.ts";
import type { ReportInputs } from "./types.ts";

const MOST_FOUND = 5;

/** summary.md: the decision in about twelve lines, to paste into a message or a ticket. */
export function summaryMd(inputs: ReportInputs, changes: ChangesJson | null = null): string {
  const { plan, reduction, conclusion } = inputs;
  const when = whenText(plan, reduction);
  const lines = [
    `**${plain(plan.experiment)}**${when === "" ? "" : ` (${plain(when)})`}`,
    "",
    `**${plain(conclusion.sentence)}**`,
    "",
    ...sentences(inputs).map((sentence) => `- ${plain(sentence)}`),
    ...(changes === null ? [] : [`- ${plain(saidBefore(changes))} What changed: ${plain(whatChanged(changes, plan))}`]),
    ...answers(inputs).map(({ question, answer }) => `- ${question} ${plain(answer)}`),
  ];
  const names = namesToIsolate([
    plan.experiment,
    ...plan.metrics.map(({ name }) => name),
    ...plan.variants.map(({ name }) => name),
  ]);
  return `${lines.map((line) => directed(line, names)).join("\n")}\n`;
}

/** What was found, and what it amounts to or what to do until it is settled; of many the first. */
function sentences(inputs: ReportInputs): string[] {
  const { plan, reduction, effects, conclusion } = inputs;
  const found = findings(inputs);
  const then =
    conclusion.decision === "not-settled"
      ? [whyNotSettled(plan, reduction), untilThen(plan)]
      : nextSentences(plan, effects, conclusion, reduction).slice(0, 2);
  return [
    ...(found.length === 0 ? conclusion.reasons : found).slice(0, MOST_FOUND),
    ...lookSentences(plan, conclusion),
    ...then,
  ];
}

/** Text from the plan as text: nothing in it may turn into markup where the summary is pasted. */
function plain(text: string): string {
  return text.replace(/\s+/g, " ").replace(/[\\`*_[\]<>#|~]/g, (sign) => `\\${sign}`);
}
