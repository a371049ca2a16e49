import type { Engine } from "./engine.ts";
import type { Group } from "./groups.ts";
import type { MeasuredMetric } from "./measuredMetric.ts";
import { nanoNumber } from "./nano.ts";
import { scaleOver } from "./pivot.ts";
import { type Dialect, doubleValue, sql, unlessZero } from "./sql/index.ts";
import { doubleTables } from "./tables.ts";
import type { ChoiceCells, ScoreTable } from "./types.ts";

/** log(1 + x) of each mean none of whose values is under 0, arm by arm; of others nothing. */
export async function loggedChoices(
  metrics: readonly MeasuredMetric[],
  engine: Engine,
  dialect: Dialect,
): Promise<ChoiceCells[][]> {
  const fit = metrics.filter(
    ({ metric, arms }) =>
      metric.summary === "mean" && arms.length > 0 && arms.every(({ ends }) => ends !== null && ends[0] >= 0n),
  );
  const asked = fit.map(({ arms, y }) => {
    const most = Math.max(...arms.map(({ ends }) => nanoNumber(ends?.[1] ?? 0n)));
    const scale = scaleOver(Math.log(1 + most));
    return { value: doubleValue(sql`ln(1 + (${dialect.toDouble(y.x)}))`, scale), scale, over: unlessZero(y.x) };
  });
  const tables = await doubleTables(asked, engine);
  return metrics.map((one) => {
    const table = tables[fit.indexOf(one)];
    return table === undefined ? [] : [{ choice: "log", logged: withZeros(table, one.arms) }];
  });
}

/** A unit with 0 has the logarithm 0: it adds to n and to nothing else, so it was not asked for. */
function withZeros(table: ScoreTable, arms: readonly Group[]): ScoreTable {
  const places = arms.map(({ variant }) => table.variant.indexOf(variant));
  const of = <T>(column: readonly T[], none: T) => places.map((place) => column[place] ?? none);
  return {
    scale: table.scale,
    variant: arms.map(({ variant }) => variant),
    bucket: arms.map(() => 0),
    n: arms.map(({ n }) => n),
    high1: of(table.high1, 0n),
    high2: of(table.high2, 0n),
    high3: of(table.high3, 0n),
    high4: of(table.high4, 0n),
    low1: of(table.low1, 0n),
    low2: of(table.low2, 0n),
    low3: of(table.low3, 0n),
    low4: of(table.low4, 0n),
    smallest: arms.map(({ n }, i) => (n === table.n[places[i] ?? -1] ? (table.smallest[places[i] ?? -1] ?? 0) : 0)),
    largest: of(table.largest, 0),
  };
}
