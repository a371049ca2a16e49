import { performance } from "node:perf_hooks";
import { deciding, type Effect } from "./decision/index.ts";
import { type ReduceOptions, UnusableLog } from "./engine/index.ts";
import { type Judged, judged } from "./judge.ts";
import { type Measured, measure, measuredBy } from "./measure.ts";
import {
  combinedPlan,
  loadPlan,
  type Plan,
  type PlanSource,
  type PlanStep,
  planChanges,
  planSteps,
} from "./plan/index.ts";
import { firstPlanOf, type PreviousReport, type Rerun, type StepJson, type StepsJson } from "./report/index.ts";

/** The new report before it is written. */
export interface Now {
  readonly plan: Plan;
  readonly planText: string;
  readonly planFolder: string;
  readonly measured: Measured;
  readonly judged: Judged;
  /** How long its pass over the log took, ms; for the terminal alone. */
  readonly tookMs?: number;
  /** The log is not at hand: steps that need it are not computed. */
  readonly fromCells?: boolean;
}

/** What a report says of the one that it replaces. Several changes cost a pass over the log for each step between them. */
export async function rerunOf(previous: PreviousReport, now: Now, options: ReduceOptions): Promise<Rerun> {
  const before = previous.report.provenance.plan.text;
  const changes = planChanges(before, now.planText);
  const sinceFirst = planChanges(firstPlanOf(previous.report).text, now.planText);
  return {
    previous,
    planChanges: changes,
    ruleChanges: sinceFirst.filter(({ decides }) => decides),
    steps: await stepsOf(previous, planSteps(changes), now, options),
  };
}

/** Null where there is but one change, so that nothing is to be told apart. */
async function stepsOf(
  { report }: PreviousReport,
  steps: readonly PlanStep[],
  now: Now,
  options: ReduceOptions,
): Promise<StepsJson | null> {
  const before = report.provenance.plan.text;
  const isSame = isSameLog(report, now.measured);
  if (steps.length + (isSame ? 0 : 1) < 2) return null;
  const textOf = (taken: readonly PlanStep[]) => combinedPlan(before, now.planText, steps, taken);
  const alone = steps.map((step) => textOf([step]));
  const added = steps.map((_, i) => (i === steps.length - 1 ? now.planText : textOf(steps.slice(0, i + 1))));
  const found = await figuresOf([...(isSame ? [] : [before]), ...alone, ...added], now, options);
  const start = isSame ? stepOf(report) : (found.get(before) ?? null);
  if (start === null) return null;
  const at = (text: string | undefined) => found.get(text ?? "") ?? null;
  return { start, changes: steps.map(({ label }, i) => ({ change: label, alone: at(alone[i]), added: at(added[i]) })) };
}

/** The figures of each plan's text on today's log; null of a text that is no plan, or that this log cannot serve. */
async function figuresOf(
  texts: readonly string[],
  now: Now,
  options: ReduceOptions,
): Promise<ReadonlyMap<string, StepJson | null>> {
  const loaded = [...new Set(texts)].map((text) => ({ text, plan: text === now.planText ? now : planOf(text) }));
  const passes = new Map<string, Measured | null>([[measuredBy(now.plan), now.measured]]);
  const needed = new Set(loaded.flatMap(({ plan }) => (plan === null ? [] : [measuredBy(plan.plan)])));
  const total = needed.size - 1;
  const figures = new Map<string, StepJson | null>();
  const began = performance.now();
  for (const { text, plan } of loaded) {
    if (plan === null) {
      figures.set(text, null);
      continue;
    }
    const key = measuredBy(plan.plan);
    if (!passes.has(key) && "source" in plan && now.fromCells !== true) {
      const done = passes.size - 1;
      options.signal?.throwIfAborted();
      options.progress?.({
        stage: stageText(done, total, done === 0 ? (now.tookMs ?? 0) : (performance.now() - began) / done),
        rows: 0,
        share: done / total,
      });
      passes.set(key, await measuredOf(plan.plan, plan.source, now.planFolder, options));
    }
    const measured = passes.get(key) ?? null;
    figures.set(text, measured === null ? null : stepJson(plan.plan, measured, judged(plan.plan, measured)));
  }
  return figures;
}

function planOf(text: string): { readonly plan: Plan; readonly source: PlanSource } | null {
  const loaded = loadPlan(text);
  return "plan" in loaded ? loaded : null;
}

async function measuredOf(
  plan: Plan,
  source: PlanSource,
  folder: string,
  { threads, memory, signal }: ReduceOptions,
): Promise<Measured | null> {
  try {
    // What was asked afterwards moves nothing of the plan's own: no step needs its reading.
    const own = { ...plan, askedAfterwards: { ...plan.askedAfterwards, metrics: [] } };
    const found = await measure(own, source, folder, { threads, memory, signal });
    return "problems" in found ? null : found;
  } catch (error) {
    if (error instanceof UnusableLog && signal?.aborted !== true) return null;
    throw error;
  }
}

function stepJson({ variants }: Plan, { reduction }: Measured, { effects, conclusion }: Judged): StepJson {
  const { decision, variant } = conclusion;
  const analysed = reduction.unitLines.find(({ id }) => id === "analysed")?.byVariant ?? [];
  return {
    decision,
    variant,
    analysed: Object.fromEntries(variants.map(({ name }, i) => [name, analysed[i] ?? 0])),
    effects: effects.map(stepEffect),
  };
}

/** What the previous report says itself, where it is of the same log. */
function stepOf({ conclusion, flow, effects }: PreviousReport["report"]): StepJson {
  return {
    decision: conclusion.decision,
    variant: conclusion.variant,
    analysed: flow.analysed,
    effects: effects.map(({ metric, variant, difference, relative, adjusted }) => {
      const { estimate, low, high } = (adjusted ?? { difference }).difference;
      return { metric, variant, estimate, low, high, relative: adjusted === null ? relative : adjusted.relative };
    }),
  };
}

function stepEffect(effect: Effect): StepJson["effects"][number] {
  const { difference, relative } = deciding(effect);
  const { estimate, low, high } = difference;
  return {
    metric: effect.metric,
    variant: effect.variant,
    estimate,
    low,
    high,
    relative: "absent" in relative ? null : { estimate: relative.estimate, low: relative.low, high: relative.high },
  };
}

/** The same files, and the same lists of ids under the same names: one that is named anew belongs to a change of the plan. */
function isSameLog({ provenance }: PreviousReport["report"], { reduction }: Measured): boolean {
  type Files = readonly { readonly name: string; readonly sha256: string }[];
  const prints = (files: Files) => JSON.stringify(files.map(({ name, sha256 }) => [name, sha256]));
  const lists = (files: Files, other: Files) =>
    prints(files.filter(({ name }) => other.some((one) => one.name === name)));
  return (
    prints(provenance.inputs) === prints(reduction.inputs) &&
    lists(provenance.lists, reduction.lists) === lists(reduction.lists, provenance.lists)
  );
}

/** @param passMs what a pass has taken so far, on average */
function stageText(done: number, total: number, passMs: number): string {
  const seconds = Math.round((passMs * (total - done)) / 1000);
  const left = seconds === 0 ? "" : `, about ${seconds} s to go`;
  return `which change did it: pass ${done + 1} of ${total} over the log${left}`;
}
