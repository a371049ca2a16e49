import type { Plan } from "./types.ts";

/**
 * The plan with the metrics that were asked afterwards in the place of its own: they are counted in a reading of their own,
 * so that nothing of the planned one can depend on them, as a rejected row would.
 */
export function planAfterwards(plan: Plan): Plan {
  const { metrics, columns, numericColumns } = plan.askedAfterwards;
  return {
    ...plan,
    metrics,
    subgroups: [],
    askedAfterwards: { subgroups: [], metrics: [], columns: [], numericColumns: [] },
    columns: [...new Set([...plan.columns, ...columns])],
    numericColumns: [...new Set([...plan.numericColumns, ...numericColumns])],
  };
}
