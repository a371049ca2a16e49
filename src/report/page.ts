import { controlOf, whenText } from "./plan-words.ts";
import { type AccrualPart, accrualParts } from "./sections/accrual.ts";
import { type AfterwardsSection, afterwardsSection } from "./sections/afterwards.ts";
import { type ChecksSection, checksSection } from "./sections/checks.ts";
import { type ChoicesFigure, choiceFigures } from "./sections/choices.ts";
import { type CountedSection, countedSection } from "./sections/counted.ts";
import { dayParts } from "./sections/days.ts";
import { type DecisionSection, decisionSection } from "./sections/decision.ts";
import { type MethodsSection, methodsSection } from "./sections/methods.ts";
import { type MetricSection, metricSections } from "./sections/metrics.ts";
import { type PowerSection, powerSection } from "./sections/power.ts";
import { type SamplingPart, samplingParts } from "./sections/sampling.ts";
import { type SubgroupPart, subgroupParts } from "./sections/subgroups.ts";
import { type TurningTable, turningTables } from "./sections/turning.ts";
import { untoldOfTime } from "./sections/weekdays.ts";
import type { ReportInputs } from "./types.ts";

/** All that the templates print: words and drawings, no figure is computed past this point. */
export interface Page {
  readonly title: string;
  readonly experiment: string;
  readonly question: string;
  readonly when: string;
  readonly version: string;
  readonly undecidable: boolean;
  readonly control: string;
  readonly confidence: string;
  readonly contents: readonly { readonly number: number; readonly id: string; readonly title: string }[];
  readonly decision: DecisionSection;
  readonly checks: ChecksSection;
  readonly counted: CountedSection;
  /** What of time cannot be told. */
  readonly untold: readonly string[];
  readonly metrics: readonly (MetricSection & FurtherOnMetric)[];
  readonly afterwards: AfterwardsSection | null;
  readonly power: PowerSection;
  readonly methods: MethodsSection;
}

/** What stands below a metric's tables. */
export interface FurtherOnMetric {
  readonly sampling: readonly SamplingPart[];
  readonly accrual: readonly AccrualPart[];
  readonly days: readonly AccrualPart[];
  readonly subgroups: readonly SubgroupPart[];
  readonly choices: readonly ChoicesFigure[];
  readonly turning: readonly TurningTable[];
}

/** Numbers are fixed (DESIGN 8): a first report has no section 2. */
const CONTENTS = [
  { number: 1, id: "decision", title: "Decision" },
  { number: 3, id: "trust", title: "Can the data be trusted?" },
  { number: 4, id: "counted", title: "Who was counted" },
  { number: 5, id: "metrics", title: "Each measure" },
  { number: 6, id: "power", title: "Power and the next test" },
  { number: 7, id: "methods", title: "Methods, sources, cautions" },
] as const;

export async function page(inputs: ReportInputs): Promise<Page> {
  const { plan, reduction, checks, effects, conclusion } = inputs;
  const isDecided = conclusion.decision !== "undecidable";
  const sampling = await samplingParts(plan, effects, reduction, isDecided);
  const accrual = await accrualParts(plan, effects, inputs.accruals, reduction);
  const days = await dayParts(plan, effects, inputs.daysSince);
  const subgroups = await subgroupParts(plan, effects, inputs.subgroups);
  const figures = await choiceFigures(plan, effects, inputs.choices);
  return {
    title: `${plan.experiment}: ${conclusion.sentence}`,
    experiment: plan.experiment,
    question: plan.question,
    when: whenText(plan, reduction),
    version: inputs.version,
    undecidable: conclusion.decision === "undecidable",
    control: controlOf(plan).name,
    confidence: `${Number((plan.decision.confidence * 100).toPrecision(12))}%`,
    contents: CONTENTS,
    decision: await decisionSection(inputs),
    checks: checksSection(checks),
    counted: countedSection(plan, reduction),
    untold: untoldOfTime(plan),
    metrics: metricSections(plan, reduction, effects).map((metric) => ({
      ...metric,
      sampling: sampling.get(metric.name) ?? [],
      accrual: accrual.get(metric.name) ?? [],
      days: days.get(metric.name) ?? [],
      subgroups: subgroups.get(metric.name) ?? [],
      choices: figures.get(metric.name) ?? [],
      // What an effect amounts to is not for data that must be mended first.
      turning: conclusion.decision === "undecidable" ? [] : turningTables(plan, reduction, effects, metric.name),
    })),
    afterwards: await afterwardsSection(inputs),
    power: powerSection(plan, reduction, effects),
    methods: methodsSection(inputs),
  };
}
