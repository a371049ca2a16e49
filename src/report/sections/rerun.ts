import { metricOf, ruleInWords, ruleOf } from "../../decision/index.ts";
import type { Plan } from "../../plan/index.ts";
import { pearson } from "../../stats/index.ts";
import { capital, count, list, plural, pText, quoted } from "../../words/index.ts";
import type { ChangesJson, EffectChange } from "../changes/types.ts";
import { isOtherConclusion, nameOf, ordinal, saidBefore, shownTexts, whatChanged } from "../changes/words.ts";
import { shortFingerprint } from "../history.ts";
import { stepSentences } from "./steps.ts";
import { whyItMoved } from "./why-moved.ts";

/** What page one of a rerun tells beyond that of a first report. */
export interface RerunLines {
  readonly head: string;
  readonly said: string;
  readonly sentences: readonly string[];
  readonly before: string;
  readonly estimates: readonly {
    readonly name: string;
    readonly before: string;
    readonly after: string;
    readonly asked: string;
  }[];
  readonly after: readonly string[];
  readonly runs: string;
}

export function rerunLines(changes: ChangesJson, plan: Plan): RerunLines {
  const { run, replaces, conclusion, effects } = changes;
  // where nothing can be decided no estimate stands on page one, this run's or the one before
  const isDecided = ![conclusion.before, conclusion.after].some(({ decision }) => decision === "undecidable");
  return {
    head: `${ordinal(run)} run, replaces the report with fingerprint ${shortFingerprint(replaces)}`,
    said: saidBefore(changes),
    sentences: [`What changed: ${whatChanged(changes, plan)}`, ...removedSentences(changes, plan)],
    before: `${ordinal(run - 1)} run`,
    estimates: isDecided ? effects.filter(({ role }) => role !== "secondary").map((one) => estimateRow(one, plan)) : [],
    after: [
      ...(isDecided ? whyItMoved(changes, plan) : []),
      ...whichChange(changes),
      ruleSentence(changes),
      countedSentence(changes, plan),
    ].filter((sentence) => sentence !== ""),
    runs: runsText(changes),
  };
}

const MOST_TOLD = 3;

/** Who was removed by each filter of visitors that came anew. */
function removedSentences({ plan: changes, flow }: ChangesJson, plan: Plan): string[] {
  return changes.flatMap(({ section, item, kind, place }) => {
    if (section !== "filters" || kind !== "added" || place !== `filters, ${item}`) return [];
    const line = flow.find(({ of, id }) => of === "units" && id === `filter:${item}`);
    if (line?.after == null) return [];
    const by = Object.entries(line.byVariant?.after ?? {}).map(([name, n]) => `${count(n)} with ${quoted(name)}`);
    const { one, many } = plan.unitCalled;
    const who = `${plural(line.after, one, many)}${by.length === 0 ? "" : `: ${list(by)}`}`;
    return [`${capital(quoted(item ?? ""))} removed ${who}${evenness(line.byVariant?.after ?? {}, plan)}.`];
  });
}

const EXPECTED_AT_LEAST = 5; // of each variant, for a chi-square test
const UNEVEN_BELOW = 0.01; // as for any check in which arms differ

/** Whether the variants lost as their planned shares would have it; of few nothing is said. */
function evenness(byVariant: Readonly<Record<string, number>>, { variants }: Plan): string {
  const counts = variants.map(({ name }) => byVariant[name] ?? 0);
  const shares = variants.map(({ allocation }) => allocation);
  const total = counts.reduce((sum, n) => sum + n, 0);
  const smallest = Math.min(...shares) / shares.reduce((sum, share) => sum + share, 0);
  if (total * smallest < EXPECTED_AT_LEAST) return "";
  const { p } = pearson(counts, shares);
  return p < UNEVEN_BELOW ? `, less even than chance would make it (${pText(p)})` : ", as even as chance would make it";
}

function estimateRow(effect: EffectChange, plan: Plan) {
  const metric = plan.metrics.find(({ name }) => name === effect.metric) ?? null;
  const { before, after } = shownTexts(effect, metric);
  const rule = metric === null ? null : ruleOf(metric);
  const asked =
    metric === null || rule === null
      ? ""
      : `${metric.role === "guardrail" ? "limit" : "at least"} ${ruleInWords(metricOf(effect, plan), rule)}`;
  const text = (of: typeof before) => (of.interval === "" ? of.estimate : `${of.estimate} (${of.interval})`);
  return { name: nameOf(effect, plan), before: text(before), after: text(after), asked };
}

function whichChange({ steps, conclusion }: ChangesJson): string[] {
  if (steps === null || !isOtherConclusion(conclusion.before, conclusion.after)) return [];
  return stepSentences(steps);
}

function ruleSentence({ rule }: ChangesJson): string {
  if (rule.length === 0)
    return "The rule did not change: same deciding measures, same amounts, same limits as in the first run.";
  const parts = rule.slice(0, MOST_TOLD).map(({ place, before, after }) => {
    return `${quoted(place)} was ${before ?? "not there"} in the first run and is ${after ?? "gone"} now`;
  });
  const more = rule.length > MOST_TOLD ? `; ${rule.length - MOST_TOLD} more in section 2` : "";
  return `The rule was changed after a result had been seen: ${parts.join("; ")}${more}.`;
}

function countedSentence({ flow, run }: ChangesJson, plan: Plan): string {
  const line = flow.find(({ of, id }) => of === "units" && id === "analysed");
  if (line?.before == null || line.after === null) return "";
  const { many } = plan.unitCalled;
  if (line.before === line.after) return `Counted were as many ${many} as before: ${count(line.after)}.`;
  return `Counted: ${count(line.after)} ${many} (${ordinal(run - 1)} run: ${count(line.before)}).`;
}

function runsText({ run }: ChangesJson): string {
  return run === 2 ? "2. The first is kept in history/." : `${run}. The earlier ones are kept in history/.`;
}
