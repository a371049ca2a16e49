import { type Check, CORRECTED_COUNTS } from "../../checks/index.ts";
import {
  askedSentence,
  type Conclusion,
  type Effect,
  effectSentence,
  guardrailSentence,
  incidentsInShort,
  lookSentences,
  nextSentences,
  otherIntervalSentence,
} from "../../decision/index.ts";
import type { Plan } from "../../plan/types.ts";
import { asSentence, count, list, plural } from "../../words/index.ts";
import type { ReportInputs } from "../types.ts";
import { mostImportant, tallyText } from "./checks.ts";
import { type ForestTable, forestTable } from "./forest.ts";
import { outcomesOf } from "./incidents.ts";

/** Section 1, the owner's page. */
export interface DecisionSection {
  readonly sentence: string;
  /** What was found, was it asked for, did anything get worse. */
  readonly paragraphs: readonly string[];
  /** Null on an undecidable report, where no estimate stands on this page. */
  readonly forest: ForestTable | null;
  readonly afterForest: readonly string[];
  /** Every reason with its figures, where the paragraphs do not tell them all. */
  readonly reasons: readonly string[];
  readonly answers: readonly Answer[];
}
export interface Answer {
  readonly question: string;
  readonly answer: string;
}

export async function decisionSection(inputs: ReportInputs): Promise<DecisionSection> {
  const { plan, effects, conclusion } = inputs;
  const undecidable = conclusion.decision === "undecidable";
  return {
    sentence: conclusion.sentence,
    paragraphs: [...findings(inputs), ...lookSentences(plan, conclusion)],
    forest: undecidable || effects.length === 0 ? null : await forestTable(effects, plan),
    afterForest: nextSentences(plan, effects, conclusion, inputs.reduction),
    reasons: plan.variants.length > 2 && !undecidable ? conclusion.reasons : [],
    answers: answers(inputs),
  };
}

/**
 * What page one tells in sentences: the adopted variant's effects, or the only one's. With several variants and none
 * adopted nothing stands before the picture; why nothing can be decided is told by the reasons.
 */
export function findings({ plan, effects, conclusion }: ReportInputs): readonly string[] {
  if (conclusion.decision === "undecidable") return conclusion.reasons;
  const variant = inFocus(plan, conclusion);
  const own = effects.filter((effect) => effect.variant === variant);
  const primaries = own.filter((effect) => effect.role === "primary");
  return [
    ...primaries.flatMap((effect) => [effectSentence(effect, plan), askedSentence(effect, plan)]),
    ...guardrails(
      own.filter((effect) => effect.role === "guardrail"),
      plan,
    ),
  ];
}

function inFocus(plan: Plan, { variant }: Conclusion): string | null {
  if (variant !== null) return variant;
  const [only, ...more] = plan.variants.filter((candidate) => !candidate.isControl);
  return only !== undefined && more.length === 0 ? only.name : null;
}

const MOST_SENTENCES = 3;

/** Each in a sentence while they are few; else those that held are only named, and the others keep their sentences. */
function guardrails(effects: readonly Effect[], plan: Plan): string[] {
  if (effects.length <= MOST_SENTENCES) return effects.map((effect) => guardrailSentence(effect, plan));
  const held = effects.filter((effect) => effect.zone === "within");
  const others = effects.filter((effect) => effect.zone !== "within");
  const names = held.length === 0 ? [] : [`Within their limits: ${list(held.map(({ metric }) => metric))}.`];
  return [...others.map((effect) => guardrailSentence(effect, plan)), ...names];
}

/** What an owner asks next, each with its answer; the summary gives the same. */
export function answers(inputs: ReportInputs): Answer[] {
  const { limits } = inputs.plan.texts;
  return [
    { question: "Can the data be trusted?", answer: trustText(inputs) },
    { question: "Counted:", answer: countedText(inputs) },
    ...(inputs.plan.incidents.length === 0
      ? []
      : [{ question: "What happened meanwhile:", answer: incidentsInShort(outcomesOf(inputs), isDecided(inputs)) }]),
    ...(limits === null ? [] : [{ question: "Not answered by this test:", answer: asSentence(limits) }]),
  ];
}

const isDecided = ({ conclusion }: ReportInputs) => conclusion.decision !== "undecidable";

/** The tally, and the caution that matters most; what stops a decision is told above it already. */
function trustText(inputs: ReportInputs): string {
  const { checks, conclusion } = inputs;
  const tally = tallyText(checks);
  const open = checks.filter((check) => check.result !== "pass");
  const told = conclusion.decision === "undecidable" ? open.filter((check) => check.result !== "fail") : open;
  const worst = mostImportant(told);
  if (worst === null) return `${tally}.`;
  const sentence = [worst, ...farFromNormal(told, worst)].map((check) => {
    const other = otherInterval(check, inputs);
    return other === null ? check.sentence : `${check.sentence.replace(` ${CORRECTED_COUNTS}`, "")} ${other}`;
  });
  return told.length === 1 ? `${tally}: ${sentence.join(" ")}` : `${tally}; what matters most: ${sentence.join(" ")}`;
}

/** Tails that are far off are told in any case. */
function farFromNormal(checks: readonly Check[], told: Check): Check[] {
  return checks.filter((check) => check.id === "normality" && check.strong && check !== told);
}

/** Of tails that are far off, which interval counts and what the other says; null where no estimate may stand on the page. */
function otherInterval(check: Check, { plan, effects, conclusion }: ReportInputs): string | null {
  if (check.id !== "normality" || !check.strong || conclusion.decision === "undecidable") return null;
  const part = check.parts.find(({ sentence }) => sentence === check.sentence);
  const effect = effects.find(({ metric, variant }) => metric === part?.about && variant === part?.figures.variant);
  return effect === undefined ? null : otherIntervalSentence(effect, plan, effects);
}

function countedText({ plan, reduction }: ReportInputs): string {
  const counted = reduction.unitLines.find((line) => line.id === "analysed")?.units ?? 0;
  const left = reduction.unitsSeen - counted;
  const { one, many } = plan.unitCalled;
  const rest =
    left === 0
      ? "None was left out."
      : `The other ${count(left)} ${left === 1 ? "is" : "are"} listed by reason in section 4.`;
  return `${count(counted)} of ${plural(reduction.unitsSeen, one, many)}. ${rest}`;
}
