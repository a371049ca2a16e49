import type { Reduction } from "../../src/engine/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import { outcomeOfEngine, outcomeOfOracle } from "../oracle/outcome.ts";
import type { OracleResult } from "../oracle/types.ts";
import { wrongGroups } from "./groupSums.ts";
import type { EngineRun } from "./run.ts";
import { wrongSums } from "./sums.ts";

/** Where an engine's reduction departs from the oracle's, one line each; none where they agree. */
export function departures(plan: Plan, oracle: OracleResult, { reduction, quantiles }: EngineRun): string[] {
  const exact = unequal(outcomeOfOracle(plan, oracle), outcomeOfEngine(plan, reduction, quantiles), "");
  if (exact.length > 0) return exact;
  const unbalanced = sums(reduction);
  if (unbalanced.length > 0) return unbalanced;
  return oracle.metrics.flatMap((metric, at) => {
    const cells = reduction.metrics[at];
    const groups = reduction.groups[at];
    if (cells === undefined || groups === undefined) return [`no cells for ${metric.metric}`];
    return [...wrongSums(plan, metric, cells), ...wrongGroups(metric, cells, groups)];
  });
}

/** The ledger adds up, and so does each unit line over the variants, but for units outside whose variant the plan lacks. */
function sums({ rowsRead, rowLines, unitsSeen, unitLines, metricLedgers }: Reduction): string[] {
  const rows = rowLines.reduce((sum, line) => sum + line.rows, 0);
  const units = unitLines.reduce((sum, line) => sum + line.units, 0);
  const lines = unitLines.filter(({ id, units: all, byVariant }) => {
    const named = byVariant?.reduce((sum, n) => sum + n, 0) ?? all;
    return id === "outside-enrolment" ? named > all : named !== all;
  });
  return [
    ...(rows === rowsRead ? [] : [`the row lines hold ${rows} rows, but ${rowsRead} were read`]),
    ...(units === unitsSeen ? [] : [`the unit lines hold ${units} units, but ${unitsSeen} were seen`]),
    ...metricLedgers.flatMap(({ metric, lines: own }) =>
      own.flatMap(({ id, rows: some }, at) =>
        some <= (rowLines[at]?.rows ?? 0) ? [] : [`${metric}, line ${id}: ${some} rows of ${rowLines[at]?.rows}`],
      ),
    ),
    ...lines.map(({ id, units: all, byVariant }) => `line ${id}: ${all} units, ${byVariant?.join(" + ")} by variant`),
  ];
}

/** Paths at which two pieces of JSON differ; the order of an object's keys counts. */
function unequal(oracle: unknown, engine: unknown, path: string): string[] {
  if (!isObject(oracle) || !isObject(engine)) {
    return oracle === engine ? [] : [`${path}: oracle ${JSON.stringify(oracle)}, engine ${JSON.stringify(engine)}`];
  }
  const keys = Object.keys(oracle);
  const others = Object.keys(engine);
  const order =
    path.endsWith("Lines") && keys.join() !== others.join()
      ? [`${path}: oracle has ${keys.join()}, engine ${others.join()}`]
      : [];
  return [
    ...order,
    ...[...new Set([...keys, ...others])].flatMap((key) => unequal(oracle[key], engine[key], `${path}/${key}`)),
  ];
}

function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === "object" && value !== null;
}
