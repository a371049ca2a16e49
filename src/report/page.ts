import type { ChangesJson } from "./changes/types.ts";
import { namesToIsolate } from "./direction.ts";
import { controlOf, kindText, whenText } from "./plan-words.ts";
import { type AccrualPart, accrualParts } from "./sections/accrual.ts";
import { type AfterwardsSection, afterwardsSection } from "./sections/afterwards.ts";
import { allocationParts } from "./sections/allocation-by-day.ts";
import { type BaselineTable, baselineTable } from "./sections/baseline.ts";
import { type ChangesSection, changesSection } from "./sections/changes.ts";
import { type ChecksSection, checksSection } from "./sections/checks.ts";
import { type ChoicesFigure, choiceFigures } from "./sections/choices.ts";
import { type ConsortTable, consortTable } from "./sections/consort.ts";
import { type CountedSection, countedSection } from "./sections/counted.ts";
import { dayParts } from "./sections/days.ts";
import { type DecisionSection, decisionSection } from "./sections/decision.ts";
import { type DesignSection, designSection } from "./sections/design.ts";
import { type DistributionFigure, distributionFigures } from "./sections/distribution.ts";
import { type FlowFigure, flowFigure } from "./sections/flow.ts";
import { type IncidentText, incidentTexts } from "./sections/incidents.ts";
import { type MethodsSection, methodsSection } from "./sections/methods.ts";
import { type MetricSection, metricSections } from "./sections/metrics.ts";
import { type PowerSection, powerSection } from "./sections/power.ts";
import { type RerunLines, rerunLines } from "./sections/rerun.ts";
import { type SamplingPart, samplingParts } from "./sections/sampling.ts";
import { type SubgroupPart, subgroupParts } from "./sections/subgroups.ts";
import { type TurningTable, turningTables } from "./sections/turning.ts";
import { untoldOfTime } from "./sections/weekdays.ts";
import type { ReportInputs } from "./types.ts";
import { withoutControls } from "./typeset.ts";

/** All that the templates print: words and drawings, no figure is computed past this point. */
export interface Page {
  readonly title: string;
  readonly experiment: string;
  readonly question: string;
  /** "A randomised experiment: calendar against list." (CONSORT 1a) */
  readonly kind: string;
  readonly when: string;
  readonly version: string;
  readonly undecidable: boolean;
  readonly control: string;
  readonly confidence: string;
  readonly contents: readonly { readonly number: number; readonly id: string; readonly title: string }[];
  readonly decision: DecisionSection;
  /** Null in a first report. */
  readonly rerun: RerunLines | null;
  readonly changes: ChangesSection | null;
  readonly checks: ChecksSection;
  /** How each day's units split; none where there is one day. */
  readonly allocation: readonly AccrualPart[];
  /** The end of section 3. */
  readonly incidents: readonly IncidentText[];
  readonly design: DesignSection;
  readonly counted: CountedSection;
  readonly flow: FlowFigure;
  /** Null where the plan names nothing known before enrolment. */
  readonly baseline: BaselineTable | null;
  /** What of time cannot be told. */
  readonly untold: readonly string[];
  readonly metrics: readonly (MetricSection & FurtherOnMetric)[];
  readonly afterwards: AfterwardsSection | null;
  /** Then section 5 begins with a list of them. */
  readonly severalMetrics: boolean;
  readonly power: PowerSection;
  readonly methods: MethodsSection;
  readonly consort: ConsortTable;
  /** Of the plan, those that run from right to left. */
  readonly names: readonly string[];
  /** Of measure, as the plan calls them. */
  readonly units: readonly string[];
  /** By id, for the terms that link to their line in Methods: only lines that this report has. */
  readonly terms: Readonly<Record<string, string>>;
}

/** What stands below a metric's tables. */
export interface FurtherOnMetric {
  readonly distribution: DistributionFigure | null;
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
  { number: 2, id: "changes", title: "What changed" },
  { number: 3, id: "trust", title: "Can the data be trusted?" },
  { number: 4, id: "counted", title: "Who was counted" },
  { number: 5, id: "metrics", title: "Each measure" },
  { number: 6, id: "power", title: "Power and the next test" },
  { number: 7, id: "methods", title: "Methods, sources, cautions" },
] as const;

export async function page(inputs: ReportInputs, changes: ChangesJson | null = null): Promise<Page> {
  const { plan, reduction, checks, effects, conclusion } = inputs;
  const isDecided = conclusion.decision !== "undecidable";
  const sampling = await samplingParts(plan, effects, reduction, isDecided);
  const accrual = await accrualParts(plan, effects, inputs.accruals, reduction);
  const days = await dayParts(plan, effects, inputs.daysSince);
  const subgroups = await subgroupParts(plan, effects, inputs.subgroups);
  const distributions = await distributionFigures(plan, reduction, effects);
  const baseline = baselineTable(plan, reduction);
  const methods = methodsSection(inputs);
  const figures = await choiceFigures(plan, effects, inputs.choices);
  return {
    title: `${plan.experiment}: ${conclusion.sentence}`,
    experiment: plan.experiment,
    question: plan.question,
    kind: kindText(plan),
    when: whenText(plan, reduction),
    version: inputs.version,
    undecidable: conclusion.decision === "undecidable",
    control: controlOf(plan).name,
    confidence: `${Number((plan.decision.confidence * 100).toPrecision(12))}%`,
    contents: CONTENTS.filter(({ number }) => number !== 2 || changes !== null),
    decision: await decisionSection(inputs),
    rerun: changes === null ? null : rerunLines(changes, plan),
    changes: changes === null ? null : await changesSection(changes, plan),
    checks: checksSection(checks),
    allocation: await allocationParts(plan, reduction),
    incidents: incidentTexts(inputs),
    design: designSection(plan, {
      drawn: effects.some(({ resampled }) => resampled !== null),
      accrual: inputs.accruals.some(({ days }) => days.length > 0),
      daysSince: inputs.daysSince.length > 0,
    }),
    counted: countedSection(plan, reduction),
    baseline,
    flow: await flowFigure(plan, reduction),
    untold: untoldOfTime(plan),
    metrics: metricSections(plan, reduction, effects).map((metric) => ({
      ...metric,
      distribution: distributions.get(metric.name) ?? null,
      sampling: sampling.get(metric.name) ?? [],
      accrual: accrual.get(metric.name) ?? [],
      days: days.get(metric.name) ?? [],
      subgroups: subgroups.get(metric.name) ?? [],
      choices: figures.get(metric.name) ?? [],
      // What an effect amounts to is not for data that must be mended first.
      turning: conclusion.decision === "undecidable" ? [] : turningTables(plan, reduction, effects, metric.name),
    })),
    afterwards: await afterwardsSection(inputs),
    severalMetrics: plan.metrics.length > 1,
    power: powerSection(plan, reduction, effects),
    methods,
    consort: consortTable(plan, reduction, baseline !== null, changes),
    units: [
      ...new Set(
        plan.metrics.flatMap(({ unitOfMeasure }) => (unitOfMeasure === null ? [] : [withoutControls(unitOfMeasure)])),
      ),
    ],
    names: namesToIsolate([
      plan.experiment,
      ...[...plan.metrics, ...plan.variants, ...plan.filters].map(({ name }) => name),
    ]),
    terms: Object.fromEntries(methods.methods.map(({ id }) => [id, id])),
  };
}
