import type { Plan } from "../plan/index.ts";
import { count, type Engine, nano } from "./engine.ts";
import type { MetricValue } from "./metrics.ts";
import { unpivoted } from "./scores.ts";
import { atRanks, type Dialect, double, ordered, type Statement, sql } from "./sql/index.ts";
import type { ScoreTable } from "./types.ts";

/** An adjusted contrast's values d = (y - pivot) - theta (x - X) of two arms; a missing x is X. */
export interface AdjustedRequest {
  readonly metric: number;
  readonly control: number;
  readonly variant: number;
  readonly theta: number;
  /** Exact decimal texts: what y and x are measured against. */
  readonly pivots: readonly [y: string, x: string];
  /** X, the mean of x over both arms, less the pivot of x: so no digit is lost where x is large and hardly varies. */
  readonly meanFromPivot: number;
}

/** What can still be asked of the units once the first sums are known. */
export interface Session {
  /** Cells of d, one table a request, of its two arms only. */
  adjusted(requests: readonly AdjustedRequest[]): Promise<ScoreTable[]>;
  /** The values of an arm at some ranks, 1 its smallest, in the order asked and in 10^-9 of the metric's unit. */
  atRanks(metric: number, variant: number, ranks: readonly number[]): Promise<bigint[]>;
}

export function openSession(plan: Plan, values: readonly MetricValue[], engine: Engine, dialect: Dialect): Session {
  const inOrder = new Map<number, Promise<void>>();
  return {
    adjusted: (requests) =>
      unpivoted(
        requests.map((request) => adjustedValue(request, values, dialect)),
        engine,
      ),
    atRanks: async (metric, variant, ranks) => {
      const value = values[metric]?.value;
      if (value === undefined || plan.variants[variant] === undefined)
        throw new Error(`no arm ${variant} of metric ${metric}`);
      if (ranks.length === 0) return [];
      const made = inOrder.get(metric) ?? engine.run(ordered(metric, value));
      inOrder.set(metric, made);
      await made;
      return valuesAt(metric, variant, ranks, engine);
    },
  };
}

async function valuesAt(metric: number, variant: number, ranks: readonly number[], engine: Engine): Promise<bigint[]> {
  const rows = await engine.query(atRanks(metric, variant, ranks));
  const found = new Map(rows.map((row) => [count(row, "place"), nano(row, "x")]));
  return ranks.map((rank) => {
    const value = found.get(rank);
    if (value === undefined) throw new Error(`arm ${variant} of metric ${metric} has no value at rank ${rank}`);
    return value;
  });
}

function adjustedValue(request: AdjustedRequest, values: readonly MetricValue[], dialect: Dialect): Statement {
  const own = values[request.metric];
  if (own?.covariate == null) throw new Error(`metric ${request.metric} has no covariate`);
  const less = (value: Statement, pivot: string) =>
    sql`(${dialect.toDouble(sql`(${value} - CAST(${pivot} AS ${dialect.sumType}))`)})`;
  const y = less(own.value, request.pivots[0]);
  const x = sql`coalesce(${less(own.covariate, request.pivots[1])} - ${double(request.meanFromPivot)}, CAST(0 AS DOUBLE))`;
  return sql`CASE WHEN variant IN (${request.control}, ${request.variant})
    THEN ${y} - ${double(request.theta)} * ${x} END`;
}
