import type { Plan, PlanChange } from "../plan/index.ts";
import { version } from "../version.ts";
import { count, plural } from "../words/index.ts";
import { compared } from "./changes/changes.ts";
import type { ChangesJson } from "./changes/types.ts";
import {
  changeText,
  conclusionText,
  isOtherConclusion,
  logText,
  movedText,
  nameOf,
  shownTexts,
} from "./changes/words.ts";
import { shortFingerprint } from "./history.ts";
import { firstPlanOf, type PreviousReport } from "./previous.ts";
import { renderComparison } from "./render.ts";
import { type ChangesSection, changesSection } from "./sections/changes.ts";
import { titleOf } from "./sections/checks.ts";

/** Two reports of one experiment; the plan is that of the second. */
export interface ComparedReports {
  readonly before: PreviousReport;
  readonly after: PreviousReport;
  readonly plan: Plan;
  readonly changes: readonly PlanChange[];
}

/** A document of its own: section 2 of a rerun, of any two reports. */
export interface Comparison {
  readonly title: string;
  readonly experiment: string;
  readonly question: string;
  readonly version: string;
  readonly undecidable: boolean;
  readonly changes: ChangesSection;
}

export async function comparisonPage(reports: ComparedReports): Promise<string> {
  const { plan } = reports;
  const changes = changesOf(reports);
  const section = await changesSection(changes, plan, "before");
  return renderComparison({
    title: `${plan.experiment}: two reports compared`,
    experiment: plan.experiment,
    question: plan.question,
    version,
    undecidable: isUndecidable(changes),
    changes: {
      ...section,
      number: null,
      intro: introText(reports),
      conclusion: conclusionSentence(changes, plan),
      ruleNote: ruleText(changes),
      rule: [],
    },
  });
}

/** The same for a terminal, plain lines. */
export function comparisonText(reports: ComparedReports): string {
  const { plan } = reports;
  const changes = changesOf(reports);
  const lines = changes.flow.filter(({ before, after }) => before !== after);
  return [
    plan.experiment,
    introText(reports),
    "",
    conclusionSentence(changes, plan),
    ruleText(changes),
    ...changes.plan.map((change) => `- ${changeText(change, plan)}`),
    logText(changes.log),
    ...(lines.length === 0 ? ["Every line of the account is as before."] : ["", "Who was counted"]),
    ...lines.map(({ of, line, before, after, ...by }) => {
      const text = (n: number | null) => (n === null ? "no such line" : count(n));
      return `- ${of === "rows" ? "rows" : plan.unitCalled.many}, ${line}: ${text(before)}, now ${text(after)} (${movedText({ before, after, ...by })})`;
    }),
    ...(isUndecidable(changes) ? [] : ["", "Estimates", ...estimateLines(changes, plan)]),
    ...(changes.checks.length === 0 ? [] : ["", "Checks"]),
    ...changes.checks.map(
      ({ id, before, after }) => `- ${titleOf(id)}: ${before ?? "not made"}, now ${after ?? "not made"}`,
    ),
  ]
    .map((line) => line.replace(/[\p{Cc}\p{Cf}\u2028\u2029]+/gu, " "))
    .join("\n");
}

function estimateLines({ effects }: ChangesJson, plan: Plan): string[] {
  return effects.map((effect) => {
    const metric = plan.metrics.find(({ name }) => name === effect.metric) ?? null;
    const { before, after } = shownTexts(effect, metric);
    const text = (of: typeof before) => (of.interval === "" ? of.estimate : `${of.estimate} (${of.interval})`);
    return `- ${nameOf(effect, plan)}: ${text(before)}, now ${text(after)}`;
  });
}

function changesOf({ before, after, changes }: ComparedReports): ChangesJson {
  return {
    run: 2,
    replaces: before.sha256,
    first: firstPlanOf(before.report),
    ...compared(before.report, after.report),
    plan: changes,
    rule: changes.filter(({ decides }) => decides),
    steps: null,
  };
}

function introText({ before, after }: ComparedReports): string {
  return `The report with the fingerprint ${shortFingerprint(before.sha256)} (before) against the one with ${shortFingerprint(after.sha256)} (now).`;
}

function conclusionSentence({ conclusion: { before, after } }: ChangesJson, plan: Plan): string {
  if (!isOtherConclusion(before, after)) return `Both conclude the same: ${conclusionText(after, plan)}.`;
  return `The conclusion is another: ${conclusionText(before, plan)}, now ${conclusionText(after, plan)}.`;
}

function ruleText({ rule, plan }: ChangesJson): string {
  if (plan.length === 0) return "The plans say the same.";
  if (rule.length === 0) return "The rule is the same; of the plan other parts differ.";
  return `What decides is not the same in ${plural(rule.length, "place", "places")} of the plan.`;
}

function isUndecidable({ conclusion: { before, after } }: ChangesJson): boolean {
  return before.decision === "undecidable" || after.decision === "undecidable";
}
