import { adjustedSums, type CovariateArm, covariateArms, type PowerSums } from "../cells/index.ts";
import type { AdjustedRequest, MetricCells, Reduction, ScoreTable } from "../engine/index.ts";
import type { Plan } from "../plan/types.ts";
import { type Adjusted, type AdjustedArm, adjusted, adjustedArms, isAbsent, meanFromPivot } from "../stats/index.ts";
import type { Absent } from "../stats/types.ts";

/** Cells of adjusted values, one table a request; a session gives them. */
export type AdjustedCells = (requests: readonly AdjustedRequest[]) => Promise<readonly ScoreTable[]>;

/** Two arms of a metric that the plan adjusts for a covariate; indices are the plan's. */
export interface Pair {
  readonly metric: number;
  readonly control: number;
  readonly variant: number;
  readonly found: PairArms | Absent;
}
export interface PairArms {
  readonly by: Adjusted;
  readonly control: PairArm;
  readonly variant: PairArm;
  /** Their values by bucket. */
  readonly cells: ScoreTable;
}
export interface PairArm {
  readonly arm: AdjustedArm;
  readonly covariate: PowerSums;
}

/**
 * The adjusted arms of every contrast of a metric that the plan adjusts: of each variant with the control, and on the
 * first primary of the variants with each other, for the best two of several. Each pair has a slope and a mean of the
 * covariate of its own. After this nothing more is needed of the units.
 */
export async function adjustedPairs(plan: Plan, { metrics }: Reduction, cells: AdjustedCells): Promise<Pair[]> {
  const slopes = plan.metrics.flatMap((_, m) => slopesOf(plan, m, metrics[m]));
  const requests = slopes.flatMap((slope) => ("request" in slope ? [slope.request] : []));
  const tables = requests.length === 0 ? [] : await cells(requests);
  return slopes.map((slope) => {
    const { metric, control, variant } = slope;
    if ("absent" in slope) return { metric, control, variant, found: { absent: slope.absent } };
    const table = tables[requests.indexOf(slope.request)];
    if (table === undefined) throw new Error(`${tables.length} tables of values for ${requests.length} requests`);
    return { metric, control, variant, found: pairArms(plan, slope, table) };
  });
}

/** The pair in this order: with the arms exchanged only the two places change. Null where the plan does not adjust. */
export function pairOf(pairs: readonly Pair[], metric: number, control: number, variant: number): Pair["found"] | null {
  const own = pairs.filter((pair) => pair.metric === metric);
  const straight = own.find((pair) => pair.control === control && pair.variant === variant);
  if (straight !== undefined) return straight.found;
  const turned = own.find((pair) => pair.control === variant && pair.variant === control)?.found ?? null;
  if (turned === null || isAbsent(turned)) return turned;
  return { ...turned, control: turned.variant, variant: turned.control };
}

/** A pair before its values are asked for. */
type Slope = Omit<Pair, "found"> & (Absent | Asked);
interface Asked {
  readonly by: Adjusted;
  readonly arms: { readonly control: CovariateArm; readonly variant: CovariateArm };
  readonly request: AdjustedRequest;
}

function slopesOf(plan: Plan, metric: number, cells: MetricCells | undefined): Slope[] {
  if (cells?.covariate == null) return [];
  const all = covariateArms(cells.of, cells.covariate, plan.variants.length);
  return contrastsOf(plan, metric).map(([control, variant]) => {
    const arms = { control: at(all, control), variant: at(all, variant) };
    const by = adjusted(arms.control, arms.variant);
    const of = { metric, control, variant };
    if (isAbsent(by)) return { ...of, ...by };
    const { pivots } = arms.control.joint;
    const meanLess = meanFromPivot(arms.control, arms.variant);
    return { ...of, by, arms, request: { ...of, theta: by.theta, pivots, meanFromPivot: meanLess } };
  });
}

/** Every variant with the control; on the first primary also the variants with each other. */
function contrastsOf({ variants, metrics }: Plan, metric: number): (readonly [control: number, variant: number])[] {
  const control = variants.findIndex(({ isControl }) => isControl);
  const others = variants.flatMap(({ isControl }, v) => (isControl ? [] : [v]));
  const isFirst = metrics.findIndex(({ role }) => role === "primary") === metric;
  return [
    ...others.map((variant) => [control, variant] as const),
    ...(isFirst ? others.flatMap((a) => others.filter((b) => b > a).map((b) => [a, b] as const)) : []),
  ];
}

function pairArms(
  plan: Plan,
  { metric, control, variant, by, arms, request }: Slope & Asked,
  table: ScoreTable,
): PairArms {
  const summary = plan.metrics[metric]?.summary === "proportion" ? "proportion" : "mean";
  const sums = adjustedSums(table, request.pivots[0], plan.variants.length);
  const own = adjustedArms(summary, arms, by.theta, { control: at(sums, control), variant: at(sums, variant) });
  return {
    by,
    control: { arm: own.control, covariate: arms.control.covariate },
    variant: { arm: own.variant, covariate: arms.variant.covariate },
    cells: table,
  };
}

function at<T>(all: readonly T[], variant: number): T {
  const found = all[variant];
  if (found === undefined) throw new Error(`no arm ${variant} among ${all.length}`);
  return found;
}
