import type { Plan } from "../../plan/types.ts";
import { count } from "../../words/index.ts";
import type { ReportInputs } from "../types.ts";
import { mostImportant, tallyText } from "./checks.ts";
import { type ForestTable, forestTable } from "./forest.ts";

/** Section 1, the owner's page. */
export interface DecisionSection {
  readonly sentence: string;
  readonly paragraphs: readonly string[];
  /** Null on an undecidable report, where no estimate stands on this page. */
  readonly forest: ForestTable | null;
  readonly answers: readonly { readonly question: string; readonly answer: string }[];
}

export async function decisionSection(inputs: ReportInputs): Promise<DecisionSection> {
  const { plan, effects, conclusion } = inputs;
  const undecidable = conclusion.decision === "undecidable";
  return {
    sentence: conclusion.sentence,
    paragraphs: conclusion.reasons,
    forest: undecidable || effects.length === 0 ? null : await forestTable(effects, plan),
    answers: answers(inputs),
  };
}

/** What an owner asks next, each with its answer; the summary gives the same. */
export function answers(inputs: ReportInputs): DecisionSection["answers"] {
  return [
    { question: "Can the data be trusted?", answer: trustText(inputs) },
    { question: "Counted", answer: countedText(inputs) },
    ...limits(inputs.plan),
  ];
}

function trustText({ checks }: ReportInputs): string {
  const worst = mostImportant(checks);
  const tally = tallyText(checks);
  if (worst === null) return `${tally}.`;
  const [cautions, failed] = [checks.filter((c) => c.result === "caution"), checks.filter((c) => c.result === "fail")];
  const one = failed.length + cautions.length === 1;
  return one ? `${tally}: ${worst.sentence}` : `${tally}. What matters most: ${worst.sentence}`;
}

function countedText({ plan, reduction }: ReportInputs): string {
  const counted = reduction.unitLines.find((line) => line.id === "analysed")?.units ?? 0;
  const left = reduction.unitsSeen - counted;
  const { many } = plan.unitCalled;
  const rest = left === 0 ? "None was left out." : `The other ${count(left)} are listed by reason in section 4.`;
  return `${count(counted)} of ${count(reduction.unitsSeen)} ${many}. ${rest}`;
}

function limits({ texts }: Plan) {
  return texts.limits === null ? [] : [{ question: "Not answered by this test", answer: texts.limits }];
}
