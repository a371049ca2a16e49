import type { ByVariant, CellTable, MetricCells, MetricGroups, Reduction } from "../../src/engine/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import { type GroupsOutcome, groupsOfEngine, groupsOfOracle } from "./group-outcome.ts";
import { ascending, nanoOf, nanoText } from "./number.ts";
import type { OracleQuantile } from "./quantile.ts";
import type { OracleFacts, OracleMetric, OracleResult, UnitValue } from "./types.ts";

/**
 * What the oracle's result and an engine's reduction have in common, as plain JSON: the exact figures.
 * (The power sums, which round, are compared in test/property/sums.ts.)
 */
export interface Outcome {
  readonly rowsRead: number;
  readonly rowLines: Readonly<Record<string, number>>;
  readonly unitsSeen: number;
  readonly unitLines: Readonly<Record<string, readonly [number, ByVariant | null]>>;
  readonly facts: Readonly<Record<string, unknown>>;
  readonly metrics: readonly MetricOutcome[];
}

export interface MetricOutcome {
  readonly metric: string;
  /** By row line: rows, and the sum of its column as text. */
  readonly ledger: Readonly<Record<string, readonly [number, string | null]>>;
  readonly leftOut: ByVariant;
  readonly countedRows: number;
  readonly countedWithoutNumber: number;
  readonly cap: { readonly value: string; readonly units: ByVariant } | null;
  /** Of a quantile, one an arm: its level and the ends of its interval. */
  readonly quantile: readonly (QuantileOutcome | null)[] | null;
  /** One an arm, in plan order. */
  readonly of: readonly ArmOutcome[];
  readonly per: readonly ArmOutcome[] | null;
  /** The covariate over the units that have one and a value, and the metric's values of these units. */
  readonly covariate: readonly CovariateOutcome[] | null;
  /** The same by variant and bucket, "0/517". */
  readonly buckets: Readonly<Record<string, ArmOutcome>>;
  readonly groups: GroupsOutcome;
}

/** Decimals as text, exact; null where the arm has no such rank. */
export interface QuantileOutcome {
  readonly at: string;
  readonly low: string | null;
  readonly high: string | null;
}

export interface CovariateOutcome {
  readonly x: ArmOutcome;
  readonly n: number;
  readonly totalY: string;
  readonly totalX: string;
}

/** Decimals as text, exact; null where there is no value. */
export interface ArmOutcome {
  readonly n: number;
  readonly total: string;
  readonly smallest: string | null;
  readonly largest: string | null;
}

export function outcomeOfOracle(plan: Plan, result: OracleResult): Outcome {
  return {
    ...ledgerOf(result),
    facts: factsOf(result.facts),
    metrics: result.metrics.map((metric) => {
      const per = metric.values.flatMap((value) => (value.per === null ? [] : [{ ...value, of: value.per }]));
      const isRatio = plan.metrics.some(({ name, per: part }) => name === metric.metric && part !== null);
      return {
        metric: metric.metric,
        ledger: metricLines(metric.ledger),
        leftOut: metric.leftOut,
        countedRows: metric.countedRows,
        countedWithoutNumber: metric.countedWithoutNumber,
        cap:
          metric.cap === null || metric.values.length === 0
            ? null
            : { value: nanoText(metric.cap.value), units: metric.cap.units },
        quantile: metric.quantile?.map(quantileOf) ?? null,
        of: armsOf(plan, metric.values),
        per: isRatio ? armsOf(plan, per) : null,
        covariate: isAdjusted(plan, metric.metric) ? covariatesOf(plan, metric.values) : null,
        buckets: Object.fromEntries(
          [...new Set(metric.values.map(bucketKey))].map((key) => [
            key,
            armOf(metric.values.filter((value) => bucketKey(value) === key)),
          ]),
        ),
        groups: groupsOfOracle(plan, metric, result.places),
      };
    }),
  };
}

/** @param quantiles one a metric, null where it is none; as in `OracleMetric` */
export function outcomeOfEngine(
  plan: Plan,
  reduction: Reduction,
  quantiles: readonly OracleMetric["quantile"][],
): Outcome {
  return {
    ...ledgerOf(reduction),
    facts: factsOf(reduction.facts),
    metrics: reduction.metrics.map((metric, m) => {
      const cells = cellsOf(metric.of);
      return {
        metric: metric.metric,
        ledger: metricLines(reduction.metricLedgers[m]?.lines ?? []),
        leftOut: metric.leftOut,
        countedRows: metric.countedRows,
        countedWithoutNumber: metric.countedWithoutNumber,
        cap:
          metric.cap === null || cells.length === 0
            ? null
            : { value: nanoText(nanoOf(metric.cap.value)), units: metric.cap.units },
        quantile: quantiles[m]?.map(quantileOf) ?? null,
        of: mergedArms(plan, cells),
        per: metric.ratio === null ? null : mergedArms(plan, cellsOf(metric.ratio.per)),
        covariate: metric.covariate === null ? null : covariateCells(plan, metric.covariate),
        buckets: Object.fromEntries(cells.map((cell) => [bucketKey(cell), merged([cell])])),
        groups: groupsOfEngine(groupsAt(reduction, m)),
      };
    }),
  };
}

function groupsAt({ groups }: Reduction, m: number): MetricGroups {
  const found = groups[m];
  if (found === undefined) throw new Error(`no groups of metric ${m}`);
  return found;
}
const metricLines = (lines: OracleMetric["ledger"]): MetricOutcome["ledger"] =>
  Object.fromEntries(lines.map(({ id, rows, sum }) => [id, [rows, sum === null ? null : nanoText(sum)] as const]));

const isAdjusted = (plan: Plan, metric: string) =>
  plan.metrics.some(({ name, adjustFor }) => name === metric && adjustFor !== null);

function covariatesOf(plan: Plan, values: readonly UnitValue[]): CovariateOutcome[] {
  return plan.variants.map((_, at) => {
    const own = values.filter(({ variant, x }) => variant === at && x !== null);
    const xs = own.map((value) => ({ ...value, of: value.x ?? 0n }));
    const total = (of: readonly UnitValue[]) => nanoText(of.reduce((sum, value) => sum + value.of, 0n));
    return { x: armOf(xs), n: own.length, totalY: total(own), totalX: total(xs) };
  });
}

function covariateCells(plan: Plan, { x, joint }: NonNullable<MetricCells["covariate"]>): CovariateOutcome[] {
  const sum = (at: number, column: readonly bigint[]) =>
    nanoText(column.reduce((total, value, row) => (joint.variant[row] === at ? total + value : total), 0n));
  return mergedArms(plan, cellsOf(x)).map((arm, at) => ({
    x: arm,
    n: joint.n.reduce((total, n, row) => (joint.variant[row] === at ? total + n : total), 0),
    totalY: sum(at, joint.totalY),
    totalX: sum(at, joint.totalX),
  }));
}

function ledgerOf(
  result: OracleResult | Reduction,
): Pick<Outcome, "rowsRead" | "rowLines" | "unitsSeen" | "unitLines"> {
  return {
    rowsRead: result.rowsRead,
    rowLines: Object.fromEntries(result.rowLines.map(({ id, rows }) => [id, rows])),
    unitsSeen: result.unitsSeen,
    unitLines: Object.fromEntries(
      result.unitLines.map(({ id, units, byVariant }) => [id, [units, byVariant] as const]),
    ),
  };
}

function factsOf(facts: OracleFacts): Record<string, unknown> {
  const instant = (us: bigint | null) => (us === null ? null : us.toString());
  return {
    enrolled: facts.enrolled,
    withRejected: facts.withRejected,
    withDuplicate: facts.withDuplicate,
    switched: facts.switched,
    duplicateIds: facts.duplicateIds,
    copiesThatDiffer: facts.copiesThatDiffer,
    copiesOfOtherUnits: facts.copiesOfOtherUnits,
    missingEvents: [...facts.missingEvents].sort(),
    missingVariants: [...facts.missingVariants].sort(),
    firstEnrolledUs: instant(facts.firstEnrolledUs),
    lastEnrolledUs: instant(facts.lastEnrolledUs),
    logEndUs: instant(facts.logEndUs),
    analysedByDay: facts.analysedByDay,
    subgroups: facts.subgroups,
    inIncidents: facts.inIncidents,
    soundness: soundnessOutcome(facts.soundness),
  };
}

/** Hours without rows are many and say nothing that their number does not. */
function soundnessOutcome({ enrolling, sources, ...facts }: OracleFacts["soundness"]): Record<string, unknown> {
  const isTaken = enrolling.taken.flat().some((units) => units > 0);
  return {
    ...facts,
    // Only where a filter took a row that enrols is anything asked of the others.
    enrolling: isTaken ? enrolling : enrolling.taken,
    sources: sources.map(({ hours, ...source }) => ({
      ...source,
      first: hours[0],
      last: hours.at(-1),
      length: hours.length,
      filled: hours.flatMap((hour, i) => (hour.rows > 0 ? [[i, hour]] : [])),
    })),
  };
}

function quantileOf(found: OracleQuantile | null): QuantileOutcome | null {
  const text = (value: bigint | null) => (value === null ? null : nanoText(value));
  return found === null ? null : { at: nanoText(found.at), low: text(found.low), high: text(found.high) };
}

function armsOf(plan: Plan, values: readonly UnitValue[]): ArmOutcome[] {
  return plan.variants.map((_, at) => armOf(values.filter(({ variant }) => variant === at)));
}

function armOf(values: readonly UnitValue[]): ArmOutcome {
  return merged(values.map(({ of }) => ({ n: 1, total: of, smallest: of, largest: of })));
}

function bucketKey({ variant, bucket }: { readonly variant: number; readonly bucket: number }): string {
  return `${variant}/${bucket}`;
}

interface Exact {
  readonly n: number;
  readonly total: bigint;
  readonly smallest: bigint;
  readonly largest: bigint;
}

function merged(groups: readonly Exact[]): ArmOutcome {
  const smallest = groups.map((group) => group.smallest).sort(ascending)[0];
  const largest = groups
    .map((group) => group.largest)
    .sort(ascending)
    .at(-1);
  return {
    n: groups.reduce((sum, group) => sum + group.n, 0),
    total: nanoText(groups.reduce((sum, group) => sum + group.total, 0n)),
    smallest: smallest === undefined ? null : nanoText(smallest),
    largest: largest === undefined ? null : nanoText(largest),
  };
}

function cellsOf(table: CellTable): (Exact & { variant: number; bucket: number })[] {
  return table.n.flatMap((n, at) =>
    n === 0
      ? []
      : [
          {
            n,
            variant: part(table.variant, at),
            bucket: part(table.bucket, at),
            total: part(table.total, at),
            smallest: part(table.smallest, at),
            largest: part(table.largest, at),
          },
        ],
  );
}

function mergedArms(plan: Plan, cells: ReturnType<typeof cellsOf>): ArmOutcome[] {
  return plan.variants.map((_, at) => merged(cells.filter(({ variant }) => variant === at)));
}

function part<T>(column: readonly T[], at: number): T {
  const value = column[at];
  if (value === undefined) throw new Error(`a cell table's columns differ in length: no row ${at} of ${column.length}`);
  return value;
}
