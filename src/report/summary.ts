import { whenText } from "./plan-words.ts";
import { answers, findings } from "./sections/decision.ts";
import type { ReportInputs } from "./types.ts";

const MOST_ROWS = 6;

/** summary.md: the decision in about twelve lines, to paste into a message or a ticket. */
export function summaryMd(inputs: ReportInputs): string {
  const { plan, reduction, conclusion } = inputs;
  const when = whenText(plan, reduction);
  const lines = [
    `**${plain(plan.experiment)}**${when === "" ? "" : ` (${plain(when)})`}`,
    "",
    `**${plain(conclusion.sentence)}**`,
    "",
    ...findings(inputs)
      .slice(0, MOST_ROWS)
      .map((sentence) => `- ${plain(sentence)}`),
    ...answers(inputs).map(({ question, answer }) => `- ${question} ${plain(answer)}`),
  ];
  return `${lines.join("\n")}\n`;
}

/** Text from the plan as text: nothing in it may turn into markup where the summary is pasted. */
function plain(text: string): string {
  return text.replace(/\s+/g, " ").replace(/[\\`*_[\]<>#|~]/g, (sign) => `\\${sign}`);
}
