import { adjustedSums, type CovariateArm, covariateArms } from "../cells/index.ts";
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
  readonly control: AdjustedArm;
  readonly variant: AdjustedArm;
}

/**
 * The adjusted arms of every contrast of a metric that the plan adjusts: of each variant with the control, and on the
 * first primary of the variants with each other, for the best two of several. Each pair has a slope and a mean of the
 * covariate of its own. After this nothing more is needed of the units.
 */
export async function adjustedPairs(plan: Plan, { metrics }: Reduction, cells: AdjustedCells): Promise<Pair[]> {
  const slopes = plan.metrics.flatMap((_, m) => slopesOf(plan, m, metrics[m]));
  const requests = slopes.flatMap(({ request }) => (request === null ? [] : [request]));
  const tables = requests.length === 0 ? [] : await cells(requests);
  return slopes.map(({ metric, control, variant, arms, by, request }) => {
    if (isAbsent(by) || request === null) return { metric, control, variant, found: by as Absent };
    const table = tables[requests.indexOf(request)];
    if (table === undefined)
      throw new Error(`${tables.length} tables of adjusted values for ${requests.length} requests`);
    const sums = adjustedSums(table, request.pivots[0], plan.variants.length);
    const [c, t] = [sums[control], sums[variant]];
    if (c === undefined || t === undefined) throw new Error(`no adjusted values of variants ${control} and ${variant}`);
    const summary = plan.metrics[metric]?.summary === "proportion" ? "proportion" : "mean";
    return {
      metric,
      control,
      variant,
      found: { by, ...adjustedArms(summary, arms, by.theta, { control: c, variant: t }) },
    };
  });
}

/** The pair in this order: with the arms exchanged only the two places change. */
export function pairOf(pairs: readonly Pair[], metric: number, control: number, variant: number): Pair["found"] | null {
  const own = pairs.filter((pair) => pair.metric === metric);
  const straight = own.find((pair) => pair.control === control && pair.variant === variant);
  if (straight !== undefined) return straight.found;
  const turned = own.find((pair) => pair.control === variant && pair.variant === control)?.found;
  if (turned === undefined) return null;
  return isAbsent(turned) ? turned : { ...turned, control: turned.variant, variant: turned.control };
}

interface Slope {
  readonly metric: number;
  readonly control: number;
  readonly variant: number;
  readonly arms: { readonly control: CovariateArm; readonly variant: CovariateArm };
  readonly by: Adjusted | Absent;
  readonly request: AdjustedRequest | null;
}

function slopesOf(plan: Plan, metric: number, cells: MetricCells | undefined): Slope[] {
  if (cells?.covariate == null) return [];
  const arms = covariateArms(cells.of, cells.covariate, plan.variants.length);
  return contrastsOf(plan, metric).map(([control, variant]) => {
    const [c, t] = [arms[control], arms[variant]];
    if (c === undefined || t === undefined) throw new Error(`no arms ${control} and ${variant} among ${arms.length}`);
    const by = adjusted(c, t);
    const request = isAbsent(by)
      ? null
      : { metric, control, variant, theta: by.theta, pivots: c.joint.pivots, meanFromPivot: meanFromPivot(c, t) };
    return { metric, control, variant, arms: { control: c, variant: t }, by, request };
  });
}

function contrastsOf({ variants, metrics }: Plan, metric: number): (readonly [control: number, variant: number])[] {
  const control = variants.findIndex(({ isControl }) => isControl);
  const others = variants.flatMap(({ isControl }, v) => (isControl ? [] : [v]));
  const isFirst = metrics.findIndex(({ role }) => role === "primary") === metric;
  return [
    ...others.map((variant) => [control, variant] as const),
    ...(isFirst ? others.flatMap((a) => others.filter((b) => b > a).map((b) => [a, b] as const)) : []),
  ];
}
