import { effectSentence } from "../../decision/index.ts";
import { list, plural, pText } from "../../words/index.ts";
import { effectText, NONE } from "../effect-text.ts";
import { measureText } from "../plan-words.ts";
import type { ReportInputs } from "../types.ts";
import { type SubgroupPart, subgroupParts } from "./subgroups.ts";

/** What was asked after the test began, apart from all that was planned. */
export interface AfterwardsSection {
  readonly sentences: readonly string[];
  readonly metrics: readonly AskedMetric[];
  readonly subgroups: readonly SubgroupPart[];
}
export interface AskedMetric {
  readonly name: string;
  readonly measure: string;
  readonly sentence: string;
  readonly difference: string;
  readonly relative: string;
  readonly p: string;
  readonly pAdjusted: string;
}

/** Null where nothing was asked. */
export async function afterwardsSection({
  plan,
  effects,
  afterwards,
}: ReportInputs): Promise<AfterwardsSection | null> {
  const { subgroups, metrics } = afterwards;
  if (subgroups.length === 0 && metrics === null) return null;
  const parts = await subgroupParts(plan, effects, subgroups, "afterwards");
  return {
    sentences: [
      "None of this was planned before the test began. Who looks at enough figures finds some that chance has made, so these suggest questions for another test, and decide nothing here.",
      ...(metrics === null ? [] : [ownReading(metrics.reduction, plan)]),
    ],
    metrics: metrics === null ? [] : metrics.effects.map((effect) => askedMetric(effect, metrics.plan)),
    subgroups: plan.metrics.flatMap(({ name }) => parts.get(name) ?? []),
  };
}

type Metrics = NonNullable<ReportInputs["afterwards"]["metrics"]>;

function ownReading({ unitLines }: Metrics["reduction"], { unitCalled: { one, many } }: Metrics["plan"]): string {
  const analysed = unitLines.find(({ id }) => id === "analysed")?.units ?? 0;
  return `The measures were counted in a reading of the log of their own, over ${plural(analysed, one, many)}, so that nothing that was planned depends on them.`;
}

function askedMetric(effect: Metrics["effects"][number], plan: Metrics["plan"]): AskedMetric {
  const metric = plan.metrics.find(({ name }) => name === effect.metric);
  if (metric === undefined) throw new Error(`no metric ${effect.metric}`);
  const several = plan.variants.length > 2;
  const { bare, relative } = effectText(effect, plan);
  const own = (effect.adjusted?.contrast ?? effect.contrast).difference;
  const signed = (text: { readonly estimate: string; readonly interval: string } | null) =>
    text === null ? NONE : `${text.estimate} (${text.interval})`;
  return {
    name: list([effect.metric, ...(several ? [effect.variant] : [])], "with"),
    measure: measureText(metric, plan),
    sentence: effectSentence(effect, plan),
    difference: signed(bare),
    relative: signed(relative),
    p: own.p === null ? NONE : pText(own.p),
    pAdjusted: effect.pAdjusted === null ? NONE : pText(effect.pAdjusted),
  };
}
