import { nanoNumber } from "../engine/nano.ts";
import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import type { FlowJson } from "./json-types.ts";
import { rowLine, unitLine } from "./ledger.ts";

/** The flow of units, the ledger of rows and that of each metric's rows, as DESIGN 7 lays them down. */
export function flowJson(plan: Plan, reduction: Omit<Reduction, "metrics" | "groups">): FlowJson {
  const analysed = reduction.unitLines.find((line) => line.id === "analysed")?.byVariant;
  if (analysed === undefined || analysed === null) throw new Error("the unit ledger has no line analysed by variant");
  return {
    rowsRead: reduction.rowsRead,
    rows: reduction.rowLines.map(({ id, rows }) => ({ id, line: rowLine(id, plan), rows })),
    unitsSeen: reduction.unitsSeen,
    units: reduction.unitLines.map(({ id, units, byVariant }) => ({
      id,
      line: unitLine(id, plan),
      units,
      byVariant: byVariant === null ? null : named(byVariant, plan),
    })),
    analysed: named(analysed, plan),
    metrics: reduction.metricLedgers.map(({ metric, lines }) => ({
      metric,
      lines: lines.map(({ id, rows, sum }) => ({
        id,
        line: rowLine(id, plan),
        rows,
        sum: sum === null ? null : nanoNumber(sum),
      })),
    })),
  };
}

function named(counts: ByVariant, { variants }: Plan): Record<string, number> {
  if (counts.length !== variants.length) {
    throw new Error(`the plan has ${variants.length} variants, the ledger counts ${counts.length}`);
  }
  return Object.fromEntries(variants.map(({ name }, i) => [name, counts[i] as number]));
}
