import { bucketsOf, type Effect } from "../decision/index.ts";
import type { AdjustedRequest, KeptBuckets, MetricCells, Reduction, ScoreTable, Session } from "../engine/index.ts";
import type { Judged } from "../judge.ts";
import { type Measured, whileOpen } from "../measure.ts";
import { type Plan, planAfterwards } from "../plan/index.ts";
import type { StepsJson } from "../report/index.ts";
import { coarseCells, coarseScores } from "./coarse.ts";
import { parsedText, textWithWholes } from "./text.ts";

/**
 * cells.json: all that the statistics of a report are computed from, of constant size and without an id. What only the
 * log can tell is taken down as it was found: the ledger, single values of ordered lists, which change did it.
 */
export interface CellsFile {
  readonly format: 1;
  readonly experiment: string;
  readonly plan: string;
  readonly reduction: Reduction;
  readonly answers: Measured["answers"];
  /** The same of metrics that were asked afterwards. */
  readonly afterwards: KeptFigures | null;
  readonly steps: StepsJson | null;
}

type KeptFigures = Pick<Measured, "reduction" | "answers">;

/** The figures of a report as they are kept. */
export function cellsFile(
  plan: Plan,
  planText: string,
  measured: Measured,
  found: Judged,
  steps: StepsJson | null,
): CellsFile {
  const { afterwards } = measured;
  return {
    format: 1,
    experiment: plan.experiment,
    plan: planText,
    ...keptFigures(plan, measured, found.effects),
    afterwards: afterwards === null ? null : keptFigures(afterwards.plan, afterwards.measured, found.afterwards),
    steps,
  };
}

function keptFigures(plan: Plan, { reduction, answers }: Measured, effects: readonly Effect[]): KeptFigures {
  return {
    reduction: {
      ...reduction,
      metrics: plan.metrics.map((metric, m) => {
        const cells = reduction.metrics[m];
        if (cells === undefined) throw new Error(`no cells for metric ${metric.name}`);
        return coarseCells(metric, cells, () => cells.kept ?? saidByBuckets(plan, m, cells, effects));
      }),
    },
    answers: {
      ...answers,
      adjusted: answers.adjusted.map(({ request, table }) => ({ request, table: coarseScores(table) })),
    },
  };
}

export const cellsText = (file: CellsFile): string => textWithWholes(file);

/** A text as cells that were kept; null where it is none. */
export function readCells(text: string): CellsFile | null {
  try {
    const found = parsedText(text) as Partial<CellsFile> | null;
    const whole = found?.format === 1 && typeof found.plan === "string" && found.reduction && found.answers;
    return whole ? (found as CellsFile) : null;
  } catch {
    return null;
  }
}

/** Without what was drawn from buckets that are gone: a report from cells shows only what it can compute itself. */
export function withoutDraws(file: CellsFile): CellsFile {
  const undrawn = ({ reduction, answers }: KeptFigures): KeptFigures => ({
    reduction: {
      ...reduction,
      metrics: reduction.metrics.map((cells) =>
        cells.kept === undefined ? cells : { ...cells, kept: cells.kept.map((one) => ({ ...one, drawn: null })) },
      ),
    },
    answers,
  });
  return { ...file, ...undrawn(file), afterwards: file.afterwards === null ? null : undrawn(file.afterwards) };
}

/** The same figures as from the log, from what was kept of them. */
export async function measuredFrom(plan: Plan, { reduction, answers, afterwards }: CellsFile): Promise<Measured> {
  const measured = await whileOpen(plan, reduction, answering(answers));
  if (afterwards === null) return measured;
  const own = planAfterwards(plan);
  const further = await whileOpen(own, afterwards.reduction, answering(afterwards.answers));
  return { ...measured, afterwards: { plan: own, measured: further } };
}

/** What the figures are after they were kept and read again: a report from cells, made from the log. */
export function throughCells(plan: Plan, planText: string, measured: Measured, found: Judged): Promise<Measured> {
  const file = readCells(cellsText(cellsFile(plan, planText, measured, found, null)));
  if (file === null) throw new Error("cells that were just written cannot be read");
  return measuredFrom(plan, withoutDraws(file));
}

/** Metrics whose draws cannot be made again, since their buckets were not kept. */
export function withoutBuckets({ reduction, afterwards }: CellsFile): readonly string[] {
  return [...reduction.metrics, ...(afterwards?.reduction.metrics ?? [])]
    .filter(({ kept }) => kept !== undefined)
    .map(({ metric }) => metric);
}

function answering(answers: Measured["answers"]): Session {
  return {
    adjusted: async (requests) => requests.map((request) => tableOf(answers.adjusted, request)),
    atRanks: async (metric, variant, ranks) =>
      ranks.map((rank) => {
        const found = answers.ranks.find(
          (one) => one.metric === metric && one.variant === variant && one.rank === rank,
        );
        if (found === undefined) throw new Error(`rank ${rank} of metric ${metric} was not kept`);
        return found.value;
      }),
  };
}

function tableOf(kept: Measured["answers"]["adjusted"], request: AdjustedRequest): ScoreTable {
  const key = JSON.stringify(request);
  const found = kept.find((one) => JSON.stringify(one.request) === key);
  if (found === undefined) throw new Error(`adjusted values were not kept for ${key}`);
  return found.table;
}

/** What the buckets of every two arms say, before they go. */
function saidByBuckets(plan: Plan, m: number, cells: MetricCells, effects: readonly Effect[]): KeptBuckets[] {
  const metric = plan.metrics[m];
  const of = metric === undefined ? null : bucketsOf(metric, cells, plan.variants.length);
  if (metric === undefined || of === null) return [];
  const pairs = comparedPairs(plan, m);
  return pairs.flatMap(({ control, variant }) =>
    (cells.covariate === null ? [false] : [false, true]).map((isAdjusted) => ({
      control,
      variant,
      isAdjusted,
      alike: of(control, variant, isAdjusted).alike,
      drawn: drawnFor(plan, metric.name, control, variant, isAdjusted, effects),
    })),
  );
}

/** The control with each variant; on the first primary the variants with each other too, for the best two of several. */
function comparedPairs(
  { variants, metrics }: Plan,
  m: number,
): { readonly control: number; readonly variant: number }[] {
  const places = variants.map((_, v) => v);
  const control = variants.findIndex(({ isControl }) => isControl);
  const isFirst = metrics.findIndex(({ role }) => role === "primary") === m;
  const from = isFirst ? places : [control];
  return from.flatMap((a) => places.filter((v) => v !== a && v !== control).map((b) => ({ control: a, variant: b })));
}

function drawnFor(
  plan: Plan,
  metric: string,
  control: number,
  variant: number,
  isAdjusted: boolean,
  effects: readonly Effect[],
): KeptBuckets["drawn"] {
  const effect = effects.find(
    (one) =>
      one.metric === metric &&
      one.control === plan.variants[control]?.name &&
      one.variant === plan.variants[variant]?.name &&
      (one.adjusted !== null) === isAdjusted,
  );
  const critical = effect?.resampled?.critical;
  return critical === undefined ? null : { critical, found: effect?.resampled };
}
