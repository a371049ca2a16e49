import { effectText, PURPOSE } from "./effect-text.ts";
import { metricOf, whenText } from "./plan-words.ts";
import { answers } from "./sections/decision.ts";
import type { ReportInputs } from "./types.ts";

const MOST_ROWS = 4;

/** summary.md: the decision in about twelve lines, to paste into a message or a ticket. */
export function summaryMd(inputs: ReportInputs): string {
  const { plan, reduction, effects, conclusion } = inputs;
  const undecidable = conclusion.decision === "undecidable";
  const when = whenText(plan, reduction);
  const lines = [
    `**${plain(plan.experiment)}**${when === "" ? "" : ` (${plain(when)})`}`,
    "",
    `**${plain(conclusion.sentence)}**`,
    ...conclusion.reasons.slice(0, MOST_ROWS).map((reason) => `- ${plain(reason)}`),
    "",
    ...(undecidable ? [] : deciding(inputs)),
    ...answers(inputs).map(
      ({ question, answer }) => `${question}${question.endsWith("?") ? "" : ":"} ${plain(answer)}`,
    ),
  ];
  return `${lines.join("\n")}\n`;

  function deciding({ plan: { metrics } }: ReportInputs): string[] {
    const rows = effects.filter((effect) => effect.role !== "secondary").slice(0, MOST_ROWS);
    return rows.map((effect) => {
      const metric = metrics.find((m) => m.name === effect.metric) ?? metricOf(plan, effect.metric);
      const text = effectText(effect, metric, plan);
      const { estimate, interval } = text.relative ?? text.difference;
      return `- ${plain(effect.metric)} (${PURPOSE[effect.role]}), ${plain(effect.variant)}: ${estimate} (${interval}), ${text.zone}`;
    });
  }
}

/** Text from the plan as text: nothing in it may turn into markup where the summary is pasted. */
function plain(text: string): string {
  return text.replace(/\s+/g, " ").replace(/[\\`*_[\]<>#|~]/g, (sign) => `\\${sign}`);
}
