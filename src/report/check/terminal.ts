import { askedOf, ruleSentences } from "../../decision/index.ts";
import { count, plural } from "../../words/index.ts";
import { PURPOSE } from "../effect-text.ts";
import { tallyText } from "../sections/checks.ts";
import { labelled, wrapped } from "../terminal-lines.ts";
import { scheduleOf } from "./schedule.ts";
import { scheduleSentences } from "./schedule-words.ts";
import type { BlindInputs } from "./types.ts";

/** The rule, how far the test is and what is wrong with the data, in plain lines; no result. */
export function blindTerminal({ plan, reduction, checks }: BlindInputs, shown: string): string {
  const counted = reduction.unitLines.find((line) => line.id === "analysed")?.units ?? 0;
  const open = checks.filter(({ result }) => result !== "pass");
  return [
    ...wrapped(plan.experiment),
    "",
    ...wrapped("Checked before the end: nothing here says how the variants do."),
    "",
    ...ruleSentences(plan).flatMap((sentence) => wrapped(sentence)),
    ...plan.metrics
      .filter(({ role }) => role !== "secondary")
      .flatMap((metric) => indented(`${metric.name} ${PURPOSE[metric.role]}: ${askedOf(metric, plan)}`)),
    "",
    ...scheduleSentences(plan, scheduleOf(plan, reduction)).flatMap((sentence) => wrapped(sentence)),
    "",
    ...open.flatMap(({ result, strong, sentence }) =>
      indented(`${result === "fail" ? "Failed" : strong ? "Strong caution" : "Caution"}: ${sentence}`),
    ),
    ...(open.length === 0 ? [] : [""]),
    ...labelled("Data", tallyText(checks)),
    ...labelled(
      "Counted",
      `${count(counted)} of ${plural(reduction.unitsSeen, plan.unitCalled.one, plan.unitCalled.many)}; all ${count(reduction.rowsRead)} rows accounted for`,
    ),
    ...labelled("Check", shown),
  ]
    .map((line) => line.trimEnd())
    .join("\n");
}

/** A sentence whose further lines stand to the right of its first. */
function indented(sentence: string): string[] {
  return wrapped(sentence, 96).map((line, i) => (i === 0 ? `  ${line}` : `    ${line}`));
}
