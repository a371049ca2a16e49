import { effectSentence } from "../../decision/index.ts";
import { plural, quoted } from "../../words/index.ts";
import { effectText, pOrNone, type Signed } from "../effect-text.ts";
import { measureText } from "../plan-words.ts";
import type { ReportInputs } from "../types.ts";
import { type SubgroupPart, subgroupParts } from "./subgroups.ts";

/** What was asked after the test began, apart from all that was planned. */
export interface AfterwardsSection {
  readonly sentences: readonly string[];
  readonly metrics: readonly AskedMetric[];
  readonly rows: readonly AskedRow[];
  readonly subgroups: readonly SubgroupPart[];
}
export interface AskedMetric {
  readonly name: string;
  readonly measure: string;
  /** One a variant. */
  readonly sentences: readonly string[];
}
export interface AskedRow {
  readonly name: string;
  readonly difference: Signed;
  readonly relative: Signed | null;
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
    metrics: metrics === null ? [] : askedMetrics(metrics),
    rows: metrics === null ? [] : metrics.effects.map((effect) => askedRow(effect, metrics.plan)),
    subgroups: plan.metrics.flatMap(({ name }) => parts.get(name) ?? []),
  };
}

type Metrics = NonNullable<ReportInputs["afterwards"]["metrics"]>;

function ownReading({ unitLines }: Metrics["reduction"], { unitCalled: { one, many } }: Metrics["plan"]): string {
  const analysed = unitLines.find(({ id }) => id === "analysed")?.units ?? 0;
  return `The measures were counted in a reading of the log of their own, over ${plural(analysed, one, many)}, so that nothing that was planned depends on them.`;
}

function askedMetrics({ plan, effects }: Metrics): AskedMetric[] {
  return plan.metrics
    .map((metric) => ({
      name: metric.name,
      measure: measureText(metric, plan),
      sentences: effects
        .filter((effect) => effect.metric === metric.name)
        .map((effect) => effectSentence(effect, plan)),
    }))
    .filter(({ sentences }) => sentences.length > 0);
}

function askedRow(effect: Metrics["effects"][number], plan: Metrics["plan"]): AskedRow {
  const several = plan.variants.length > 2;
  const { bare, relative } = effectText(effect, plan);
  const own = (effect.adjusted?.contrast ?? effect.contrast).difference;
  return {
    name: several ? `${effect.metric} with ${quoted(effect.variant)}` : effect.metric,
    difference: bare,
    relative,
    p: pOrNone(own.p),
    pAdjusted: pOrNone(effect.pAdjusted),
  };
}
